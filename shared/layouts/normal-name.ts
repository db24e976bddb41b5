/**
 * A column's name for comparing: lower case, without accents, its words (also those of "netSales") apart by one blank. A name
 * without letters and digits stays as it is.
 *
 * @example normalName(" Net_Sales (€) ") // "net sales"
 */
export function normalName(name: string): string {
  const words = name
    .replace(/(\p{Ll})(\p{Lu})/gu, "$1 $2")
    .toLowerCase()
    .replaceAll("ß", "ss")
    .normalize("NFD")
    .replace(/\p{Mn}/gu, "")
    .replace(/[^\p{L}\p{N}]+/gu, " ")
    .trim();
  return words || name.trim();
}
