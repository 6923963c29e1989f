/** Text that is HTML already. Everything else that gets into a page is escaped on its way. */
export interface Html {
  readonly html: string;
}

type Piece = Html | string | number | undefined | readonly Piece[];

const entities: Readonly<Record<string, string>> = {
  "&": "&amp;",
  "<": "&lt;",
  ">": "&gt;",
  '"': "&quot;",
  "'": "&#39;",
};

const escaped = (text: string): string => text.replace(/[&<>"']/g, (sign) => entities[sign]!);

function written(piece: Piece): string {
  if (piece === undefined) return "";
  if (typeof piece === "string") return escaped(piece);
  if (typeof piece === "number") return String(piece);
  if ("html" in piece) return piece.html;
  return piece.map(written).join("");
}

/** A template of HTML: what stands in it is kept, what is put in is escaped unless it is Html itself. */
export function html(parts: TemplateStringsArray, ...pieces: readonly Piece[]): Html {
  return { html: parts.reduce((text, part, i) => text + written(pieces[i - 1]) + part) };
}

/** Pieces one after the other with something between them. */
export const joined = (pieces: readonly (Html | string)[], between: Html | string): Html => ({
  html: pieces.map(written).join(written(between)),
});

export const nothing: Html = { html: "" };
