import { type Notice, type Place, type Problem, problemCatalogue } from "../problem/index.ts";

/** RFC 6901. */
const jsonPointer = (place: Place): string =>
  place.map((part) => `/${String(part).replaceAll("~", "~0").replaceAll("/", "~1")}`).join("");

export interface ProblemDetails {
  readonly type: string;
  readonly title: string;
  readonly status: number;
  readonly detail: string;
  readonly instance?: string;
  readonly faults?: readonly { readonly pointer: string; readonly received?: unknown; readonly expected: string }[];
}

/** A Problem as RFC 9457 problem details. `instance`: the request's id, where there is one. */
export function problemDetails(problem: Problem, instance?: string): ProblemDetails {
  const { status, title } = problemCatalogue[problem.code];
  const faults = problem.faults.map(({ place, received, expected }) => ({
    pointer: jsonPointer(place),
    ...(received === undefined ? {} : { received: short(received) }),
    expected,
  }));
  return {
    type: `/problems/${problem.code}`,
    title,
    status,
    detail: problem.message,
    ...(instance === undefined ? {} : { instance }),
    ...(faults.length === 0 ? {} : { faults }),
  };
}

const short = (value: unknown): unknown =>
  typeof value === "string" && value.length > 200 ? `${value.slice(0, 200)}...` : value;

export const writeNotice = ({ code, text, place }: Notice): { code: string; text: string; pointer?: string } =>
  place === undefined ? { code, text } : { code, text, pointer: jsonPointer(place) };
