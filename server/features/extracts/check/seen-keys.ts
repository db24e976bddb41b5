import { addWeeks } from "@shared/calendar";

/** Bits kept in all, which is 32 MB; of a file that needs more it is not known whether keys repeat. */
const mostBits = 2 ** 28;

type Limits = { /** Above every number of a store or product. */ stores: number; products: number };

/**
 * Tells whether a product, store and week stand twice in a file, by a bit for each that there can be: far cheaper than to
 * sort all rows by them, which is then needed only where some do.
 */
export class SeenKeys {
  readonly #bitsOfWeek: number;
  readonly #products: number;
  readonly #weeks = new Map<string, Uint32Array<ArrayBuffer>>();
  #week = "";
  #bits = new Uint32Array(0);
  #mayRepeat = false;

  constructor({ stores, products }: Limits) {
    this.#bitsOfWeek = stores * products;
    this.#products = products;
  }

  /** True where a key was added twice, or where that is not known. */
  get mayRepeat(): boolean {
    return this.#mayRepeat;
  }

  /** Whether some product of a store has weeks before and after one that it lacks; true also where that is not known. */
  mayHaveGaps(): boolean {
    if (this.#mayRepeat) return true;
    const weeks = [...this.#weeks.keys()].sort();
    const seen = new Uint32Array(Math.ceil(this.#bitsOfWeek / 32));
    const ended = new Uint32Array(seen.length);
    return weeks.some((week, at) => {
      const follows = at === 0 || addWeeks(weeks[at - 1] ?? week, 1) === week;
      return comesBack({ bits: this.#weeks.get(week) ?? ended, seen, ended, follows });
    });
  }

  add(product: number, store: number, week: string): void {
    if (this.#mayRepeat) return;
    if (week !== this.#week && !this.#turnTo(week)) return;
    const place = store * this.#products + product;
    const bit = 1 << (place & 31);
    const word = this.#bits[place >>> 5] ?? 0;
    if ((word & bit) !== 0) this.#giveUp();
    else this.#bits[place >>> 5] = word | bit;
  }

  #turnTo(week: string): boolean {
    let bits = this.#weeks.get(week);
    if (!bits) {
      if ((this.#weeks.size + 1) * this.#bitsOfWeek > mostBits) {
        this.#giveUp();
        return false;
      }
      bits = new Uint32Array(Math.ceil(this.#bitsOfWeek / 32));
      this.#weeks.set(week, bits);
    }
    this.#week = week;
    this.#bits = bits;
    return true;
  }

  #giveUp(): void {
    this.#mayRepeat = true;
    this.#weeks.clear();
    this.#bits = new Uint32Array(0);
  }
}

type Turn = { bits: Uint32Array; /** Of any week so far, and those of them that lacked one; both are carried on. */ seen: Uint32Array; ended: Uint32Array; follows: boolean };

/** Whether a bit is set that was set before, but not in the week before this one. */
function comesBack({ bits, seen, ended, follows }: Turn): boolean {
  for (let at = 0; at < bits.length; at++) {
    const [now, before] = [bits[at] ?? 0, seen[at] ?? 0];
    const gone = follows ? (ended[at] ?? 0) : before;
    if ((gone & now) !== 0) return true;
    ended[at] = gone | (before & ~now);
    seen[at] = before | now;
  }
  return false;
}
