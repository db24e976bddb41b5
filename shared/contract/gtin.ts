/**
 * Whether a text is a GTIN: 8, 12, 13 or 14 digits of which the last is the check digit (GS1 General Specifications, 7.9: the
 * digits before it, weighted 3, 1, 3, ... from the right, and it sum to a multiple of 10).
 *
 * @example isGtin("4006381333931") // true
 */
export function isGtin(text: string): boolean {
  if (!/^(?:\d{8}|\d{12,14})$/.test(text)) return false;
  let sum = 0;
  for (let fromRight = 0; fromRight < text.length; fromRight++) {
    sum += Number(text[text.length - 1 - fromRight]) * (fromRight % 2 === 0 ? 1 : 3);
  }
  return sum % 10 === 0;
}
