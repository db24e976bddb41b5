/** Prices of a product that are kept to tell its median by. */
const mostSampled = 128;
/** A price this many times the product's first, or less than that part of it, may turn out to be unusual. */
const farFromFirst = 2;
/** Values kept as the file has them, in all. */
const mostRemembered = 20_000;

/** Where a price stands in the file. */
export type PriceCell = { line: number; column: string; value: string };

/** The prices of one product in a file: the lowest, the highest, and an even sample of all of them. */
export class ProductPrices {
  lowest = Infinity;
  highest = -Infinity;
  #first = 0;
  #count = 0;
  #stride = 1;
  #sample: number[] = [];

  /** Takes a price; answers whether it is far from the product's first. */
  add(price: number): boolean {
    if (this.#count === 0) this.#first = price;
    if (price < this.lowest) this.lowest = price;
    if (price > this.highest) this.highest = price;
    if (this.#count++ % this.#stride === 0) this.#keep(price);
    return price > this.#first * farFromFirst || price * farFromFirst < this.#first;
  }

  get sample(): readonly number[] {
    return this.#sample;
  }

  /** Where the sample is full, every second price of it goes, and from then on half as many are taken. */
  #keep(price: number): void {
    this.#sample.push(price);
    if (this.#sample.length < mostSampled) return;
    this.#sample = this.#sample.filter((_, at) => at % 2 === 0);
    this.#stride *= 2;
  }
}

/** The prices in a file by product, and the odd ones among them as they stand there. */
export class PriceTally {
  readonly #products = new Map<number, ProductPrices>();
  readonly #cells = new Map<number, PriceCell>();

  of(productId: number): ProductPrices {
    const known = this.#products.get(productId);
    if (known) return known;
    const prices = new ProductPrices();
    this.#products.set(productId, prices);
    return prices;
  }

  remember(cell: PriceCell): void {
    if (this.#cells.size < mostRemembered) this.#cells.set(cell.line, cell);
  }

  /** The price of a line as the file has it, where it was remembered. */
  cellOf(line: number): PriceCell | undefined {
    return this.#cells.get(line);
  }

  get products(): ReadonlyMap<number, ProductPrices> {
    return this.#products;
  }
}
