/** What a rule says where nothing more particular can be said. */
export type Rule = { severity: "error" | "warning"; reason: string; remedy: string; /** What kind of fault it is, for lists. */ about: string };
type Words = Omit<Rule, "about">;

const error = (reason: string, remedy: string): Words => ({ severity: "error", reason, remedy });
const warning = (reason: string, remedy: string): Words => ({ severity: "warning", reason, remedy });

const about = <Name extends string>(heading: string, words: Record<Name, Words>) =>
  Object.fromEntries(Object.entries<Words>(words).map(([name, rule]) => [name, { ...rule, about: heading }])) as Record<Name, Rule>;

const atTheSource = "Correct it in the system the file comes from and upload the file again.";

/** Everything that can be wrong with a row. An error keeps the row out; a warning does not. */
export const rules = {
  ...about("The row as text", {
    "open-quote": error("Quotes in this line do not close, or do not close before the next column", "Write a quote inside a value twice, and close each value that begins with one."),
    "ragged-row": error("The row has more or fewer fields than the header", "A comma inside a value needs quotes around the value."),
    "unknown-column": warning("Columns that are not ours are passed over", "Nothing to do, unless a column was meant to be one of ours: then correct its name."),
    "control-character": error("The value holds control characters", atTheSource),
    "missing-value": error("The value is missing", "Fill it in, or leave the row out."),
    "too-long": error("The value is longer than can be kept", "Shorten it."),
  }),
  ...about("The row as a layout reads it", {
    "unreadable-number": error("The number is not written as set for this file", "Change the decimal sign or the thousands under \"How it is read\", or correct the value."),
    "unreadable-day": error("The day or week is not written as set for this file", "Change the order of day and month under \"How it is read\", or correct the value."),
    "unreadable-word": error("The word has no meaning in this file's layout", "Say under \"How it is read\" what the word means, or correct the value."),
    "unreadable-code": error("A spreadsheet has shortened the code, and its digits are lost", "Format the column as text in the spreadsheet and export the file again."),
  }),
  ...about("Numbers", {
    "not-a-number": error("The value is not a number", "Write numbers like 1234.5: a point for decimals, no thousands separators, no currency sign."),
    "too-many-decimals": error("Units have at most 3 decimals", "Round them to 3 decimals."),
    "too-large": error("The number is larger than can be kept", "Check the unit it is given in."),
    rounded: warning("Amounts are kept with 4 decimals", "Nothing to do if rounding to 4 decimals is right."),
    "not-a-flag": error("The value is neither 0 nor 1", "Write 1 for yes, and 0 or nothing for no."),
    "not-days": error("The value is not a number of days of a week", "Write a whole number from 0 to 7."),
    "negative-amount": error("The amount is negative", atTheSource),
    "zero-price": warning("A price of 0 is taken as not known", "Leave the price empty where it is not known."),
    "bad-tax-rate": error("The tax rate is not between 0 and 1", "Write a share of the net price: 0.21 for 21 %."),
    "temperature-out-of-range": error("No week has such a mean temperature", "Give the week's mean in degrees Celsius, between -60 and 60."),
  }),
  ...about("Days and weeks", {
    "bad-day": error("The value is not a day", "Write YYYY-MM-DD, for example 2026-06-08."),
    "bad-week": error("The value is not a week", "Write the week's first day as YYYY-MM-DD."),
    "not-week-start": error("The day is not the first of a week", "Give the first day of the week, by the chain's setting."),
    "week-out-of-range": error("The week lies in a year that cannot be meant", "Give a week from 1970 on, at most a year ahead."),
    "week-in-future": error("The week has not begun yet", "Give weeks that have begun; a plan belongs into a scenario."),
    "week-not-over": warning("The week is not over yet", "Load it again once it has ended: until then its units are too low."),
    "missing-weeks": warning("There are rows before and after, but none for these weeks", "Nothing to do where nothing was sold and the source leaves such rows out; otherwise get the rows and load them."),
    "shared-days": error("The days overlap with others of the same", "Correct the days, or end the earlier ones first."),
    "no-contribution": error("Neither an amount per unit nor a lump sum is given", "Fill in one of the two, or leave the row out."),
    "last-before-first": error("The last day lies before the first", "Exchange the two days, or correct one."),
  }),
  ...about("Codes", {
    "unknown-store": error("There is no store with this code", "If it is new, enter it in the catalogue and check again. If it is mistyped, correct it in the system the file comes from."),
    "unknown-product": error("There is no product with this code or GTIN", "If it is new, enter it in the catalogue and check again. If it is mistyped, correct it in the system the file comes from."),
    "ambiguous-product": error("Several products have this GTIN", "Give the chain's own code of the product."),
    "unknown-region": warning("No store is in this region", "Check the region's name against the stores."),
    "store-or-region": error("A temperature is for a region or for a store", "Fill in one of the two."),
    "bad-gtin": error("The value is not a GTIN", "Give its 8, 12, 13 or 14 digits; spreadsheets like to write them as 2.0E+12."),
    "gtin-check-digit": error("The GTIN's last digit does not go with the others", "Correct the digits: one is wrong, or two have changed places."),
    "unknown-mechanic": error("The mechanic is none of those we know", "Use none, price_cut, multi_buy, coupon or other."),
  }),
  ...about("What values say together", {
    "sales-without-units": error("There are net sales, but no units", atTheSource),
    "negative-net-sales": error("Units were sold, but net sales are negative", atTheSource),
    "units-without-sales": warning("Units were sold, but net sales are 0: no price was paid", "Nothing to do if they were given away."),
    "net-returns": warning("More was returned than sold; the week is modelled as 0 units", "Nothing to do if it is so."),
    "net-sales-off": warning("Net sales do not go with units and price", "Check units, net sales and prices. Nothing to do for a multi-buy or coupon: name it in mechanic."),
    "cost-above-price": warning("One unit cost more than was paid for it", "Check that the cost is of one unit and net of tax. Nothing to do if it was sold below cost."),
    "unusual-price": warning("The price is less than a fifth or more than five times what is usual for the product", "Check the unit: a price for a case, in cents, or with a decimal sign lost. Nothing to do if it is right."),
    "before-opening": error("The store had not opened yet", "Correct the store or the week, or the store's first day in the catalogue."),
    "after-closing": error("The store had closed for good", "Correct the store or the week, or the store's last day in the catalogue."),
    "partly-open": warning("The store was open on part of the week only", "Give the days it was open in open_days, so that few units are not taken for little demand."),
    "outside-listing": warning("The product is not listed in the store in this week", "Correct the row, or enter the listing in the catalogue."),
    "sold-out-too-long": error("It was sold out on more days than the store was open", atTheSource),
    "repeated-row": warning("The same row stands in the file again", "Nothing to do: it is taken once."),
    "contradicting-rows": error("Rows of the file contradict each other", "Leave only the right one in the file."),
  }),
} satisfies Record<string, Rule>;

export type RuleName = keyof typeof rules;
