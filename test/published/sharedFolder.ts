import { existsSync } from "node:fs";
import { fileURLToPath } from "node:url";

/**
 * The folders of open data and of published values beside the repository. They are read in place and never copied in;
 * what needs one that is absent is skipped and says so.
 */
export interface Found {
  readonly path: string;
  /** Why a check is skipped when the path is not there; null when it is. */
  readonly absent: string | null;
}

const beside = (name: string): string => fileURLToPath(new URL(`../../../${name}`, import.meta.url));

function look(folder: string, name: string, variable: string, place: string): Found {
  const path = `${folder.replace(/\/$/, "")}/${name}`;
  return { path, absent: existsSync(path) ? null : `${place}/${name} is absent (or name its folder by ${variable})` };
}

/** A file of open data. */
export const openData = (name: string): Found =>
  look(process.env.TAULINE_DATA ?? beside("shared/data"), name, "TAULINE_DATA", "../shared/data");

/** A file of the shared folder. */
export const shared = (name: string): Found =>
  look(process.env.TAULINE_SHARED ?? beside("shared"), name, "TAULINE_SHARED", "../shared");
