/** JSON for readers: what fits a line stays on it. */
export function readableJson(value: unknown, indent = ""): string {
  const line = spaced(value);
  if (typeof value !== "object" || value === null || indent.length + line.length <= 76) return line;
  const deeper = `${indent}  `;
  const inside = Array.isArray(value)
    ? value.map((item) => readableJson(item, deeper))
    : Object.entries(value).map(([name, item]) => `${JSON.stringify(name)}: ${readableJson(item, deeper)}`);
  const [open, close] = Array.isArray(value) ? ["[", "]"] : ["{", "}"];
  return `${open}\n${inside.map((text) => deeper + text).join(",\n")}\n${indent}${close}`;
}

/** On one line, with spaces where people write them. */
function spaced(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map(spaced).join(", ")}]`;
  if (typeof value !== "object" || value === null) return JSON.stringify(value);
  const fields = Object.entries(value).map(([name, item]) => `${JSON.stringify(name)}: ${spaced(item)}`);
  return fields.length === 0 ? "{}" : `{ ${fields.join(", ")} }`;
}
