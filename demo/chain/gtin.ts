/**
 * Appends the check digit to the first twelve digits of a GTIN-13: the digit that brings the sum of all digits,
 * weighted 1, 3, 1, 3, ... from the left, to a multiple of ten (GS1 General Specifications, section 7.9.1).
 *
 * @throws RangeError when `digits` is not twelve digits
 * @example gtin13("629104150021") // "6291041500213"
 */
export function gtin13(digits: string): string {
  if (!/^\d{12}$/.test(digits)) throw new RangeError(`A GTIN-13 is made from twelve digits, not "${digits}".`);
  const sum = Array.from(digits, Number).reduce((total, digit, index) => total + digit * (index % 2 === 0 ? 1 : 3), 0);
  return `${digits}${(10 - (sum % 10)) % 10}`;
}
