import type { Detected } from "./detected";
import { normalName } from "./normal-name";

const withoutTax = /(?:^| )(?:ht|hors taxes?|excl|exkl|exclusive|excluding|ex (?:vat|tax|btw)|netto|nettoumsatz|sin iva|ohne mwst)(?: |$)/;

/**
 * Whether amounts hold the tax, by the name of the column of net sales; a name that says nothing means that they do.
 *
 * @example detectTax("CA HT").value // "excluded"
 */
export function detectTax(salesName: string): Detected<"included" | "excluded"> {
  if (!withoutTax.test(normalName(salesName))) return { value: "included", confidence: 0.5, warnings: [] };
  const message = `The name "${salesName}" is taken to say that prices and net sales are without tax. Look whether that is right.`;
  return { value: "excluded", confidence: 0.7, warnings: [{ code: "tax-guessed", message }] };
}
