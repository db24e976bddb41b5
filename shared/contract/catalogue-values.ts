import { z } from "zod";

// eslint-disable-next-line no-control-regex -- control characters are what it looks for
const controlCharacters = /[\u0000-\u001f\u007f]/;
const mostAmount = 9_999_999_999;
const amountDecimals = 4;

/** A text that people gave, without blanks around it; one line, since files keep a row a line. */
export const textSchema = (longest: number) =>
  z.string().trim().min(1, "Fill this in.").max(longest, `Use at most ${longest} characters.`)
    .refine((text) => !controlCharacters.test(text), "Leave out tabs, line ends and other control characters.");

export const regionSchema = textSchema(80);

/** An amount of money, as the database keeps it. */
export const amountSchema = z.number("Give a number.").min(0, "An amount is not negative.").max(mostAmount, "This is larger than can be kept.")
  .refine((amount) => hasAtMostDecimals(amount, amountDecimals), "Amounts have at most 4 decimals.");

/** Tax as a share of the net price. */
export const taxRateSchema = z.number("Give a number.").min(0, "A tax rate is between 0 and 1: 0.21 for 21 %.").max(1, "A tax rate is between 0 and 1: 0.21 for 21 %.")
  .refine((rate) => hasAtMostDecimals(rate, amountDecimals), "A tax rate has at most 4 decimals.");

/**
 * Stands for what a row holds. Send it back as `If-Match`, in quotes, and a change is refused where someone made another
 * one meanwhile; `If-None-Match: *` refuses to change what is there already. Without either the last one wins.
 */
export const versionSchema = z.string();

/** The last of some days does not lie before the first; an open end does not either. */
export const inOrder = { check: ({ firstDay, lastDay }: { firstDay: string; lastDay: string | null }) => lastDay === null || lastDay >= firstDay, told: { path: ["lastDay"], message: "The last day lies before the first." } };

function hasAtMostDecimals(value: number, decimals: number): boolean {
  return Number(value.toFixed(decimals)) === value;
}
