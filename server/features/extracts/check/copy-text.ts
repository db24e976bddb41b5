const special = /[\\\t\n\r]/g;
const escapes: Record<string, string> = { "\\": "\\\\", "\t": "\\t", "\n": "\\n", "\r": "\\r" };

/** A value in COPY's text format (PostgreSQL documentation, COPY, "Text Format"). */
export function copyText(value: string | null): string {
  if (value === null) return "\\N";
  return value.search(special) === -1 ? value : value.replace(special, (character) => escapes[character] ?? character);
}

/** A row in COPY's text format, without the line end. */
export function copyRow(values: readonly (string | null)[]): string {
  return values.map(copyText).join("\t");
}
