import type { Day } from "@shared/calendar";
import type { UnknownCodes } from "@shared/contract/unknown-codes";
import type { WeekRange } from "../load/sales-columns";
import { CodeTally } from "./code-tally";
import { PriceTally } from "./price-tally";
import type { SeenKeys } from "./seen-keys";

/** What is gathered beside the issues while the rows of one file are read. */
export class CheckNotes {
  readonly unknownStores = new CodeTally();
  readonly unknownProducts = new CodeTally();
  readonly prices = new PriceTally();
  /** Of kinds whose keys are watched while they are read. */
  keys: SeenKeys | undefined;

  /** First and last week of the rows read; none where there are none. */
  weeks: WeekRange | undefined;

  addWeek(week: Day): void {
    if (!this.weeks) this.weeks = { first: week, last: week };
    else if (week < this.weeks.first) this.weeks.first = week;
    else if (week > this.weeks.last) this.weeks.last = week;
  }

  /** Whether rows with the same key may stand in the file. */
  get mayRepeat(): boolean {
    return this.keys?.mayRepeat ?? true;
  }

  unknownCodes(): UnknownCodes {
    const [stores, products] = [this.unknownStores, this.unknownProducts];
    return { stores: stores.listed(), storesTotal: stores.total, products: products.listed(), productsTotal: products.total };
  }
}
