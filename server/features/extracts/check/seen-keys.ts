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
