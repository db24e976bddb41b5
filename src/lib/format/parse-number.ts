/**
 * Reads a number as people type it: "1.49", "1,49", "€1.49", "−5", "+12 %", "1 250,5", "1,250.5".
 * Where both marks stand the later one is the decimal mark; a single comma before exactly three digits groups
 * thousands only when it is repeated, because "1,250" for a price is far rarer than "1,25" and both are seen.
 */
export const parseNumber = (text: string): number | null => {
  const cleaned = text.replace(/[\u2212\u2013]/g, "-").replace(/[^\d.,+-]/g, "");
  if (!/\d/.test(cleaned)) return null;
  const value = Number(withDecimalPoint(cleaned));
  return Number.isFinite(value) ? value : null;
};

const withDecimalPoint = (text: string): string => {
  const lastComma = text.lastIndexOf(",");
  const lastPoint = text.lastIndexOf(".");
  if (lastComma >= 0 && lastPoint >= 0) {
    const [decimal, grouping] = lastComma > lastPoint ? [",", "."] : [".", ","];
    return text.replaceAll(grouping, "").replace(decimal, ".");
  }
  const mark = lastComma >= 0 ? "," : ".";
  const isRepeated = text.indexOf(mark) !== text.lastIndexOf(mark);
  return isRepeated ? text.replaceAll(mark, "") : text.replace(mark, ".");
};
