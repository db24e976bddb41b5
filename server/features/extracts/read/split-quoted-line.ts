import type { Separator } from "@shared/contract/layouts";

const quoteCode = 34;

/**
 * Fields of a line whose quotes open and close within it, each around a whole field (RFC 4180); null where that is not so.
 *
 * @example splitQuotedLine('1,"a, b"', ",") // ["1", "a, b"]
 */
export function splitQuotedLine(line: string, separator: Separator): string[] | null {
  const fields: string[] = [];
  let at = 0;
  for (;;) {
    const end = line.charCodeAt(at) === quoteCode ? closingQuote(line, at + 1) + 1 : line.indexOf(separator, at);
    if (line.charCodeAt(at) === quoteCode) {
      if (end === 0 || (end < line.length && line[end] !== separator)) return null;
      const inner = line.slice(at + 1, end - 1);
      fields.push(inner.includes('"') ? inner.replaceAll('""', '"') : inner);
      if (end === line.length) return fields;
    } else {
      fields.push(end === -1 ? line.slice(at) : line.slice(at, end));
      if (end === -1) return fields;
    }
    at = end + 1;
  }
}

/** Where a field's quote closes; -1 where it does not. */
function closingQuote(line: string, from: number): number {
  let at = line.indexOf('"', from);
  while (at !== -1 && line.charCodeAt(at + 1) === quoteCode) at = line.indexOf('"', at + 2);
  return at;
}
