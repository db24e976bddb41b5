/*
 * A spreadsheet runs a cell that begins with one of = + - @, a tab or a return as a formula, also from a CSV file. An
 * apostrophe in front makes it text. A text that has apostrophes before such a sign gets one more, so that taking one off
 * always gives back what was there.
 */
const dangerous = /^'*[=+\-@\t\r]/;
const guarded = /^'+[=+\-@\t\r]/;

/**
 * A text that no spreadsheet takes for a formula.
 *
 * @example harmless("=1+1") // "'=1+1"
 */
export function harmless(text: string): string {
  return dangerous.test(text) ? `'${text}` : text;
}

/**
 * What `harmless` was given: the exact inverse. Other texts come back as they are.
 *
 * @example withoutGuard("'=1+1") // "=1+1"
 */
export function withoutGuard(text: string): string {
  return guarded.test(text) ? text.slice(1) : text;
}
