/** Real minus sign, as wide as the plus. */
export const minus = "\u2212";
/** Narrow space that never breaks a line: between a number and its sign or unit. */
export const thinSpace = "\u202F";
export const times = "\u00D7";
export const enDash = "\u2013";
export const missing = "\u2013";

/** Intl writes a hyphen for minus in many languages. */
export const withRealMinus = (text: string): string => text.replace(/^-|(?<=[^\d])-(?=\d)/, minus);
