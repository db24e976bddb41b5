/** Distinct values are looked for in a table of this many at most; where there are more, sorting is quicker. */
const mostDistinct = 16_384;

/** Distinct values times levels up to which a table of both is made. */
export const mostCells = 1_000_000;

/** Distinct values of a column, ascending, how many rows have each, and per row the position of its own. */
export type DistinctValues = { values: Float64Array; counts: Float64Array; codes: Int32Array };

/**
 * Finds a column's distinct values in one pass through a hash table with open addressing (Knuth 1998, vol. 3, section 6.4),
 * then puts them in order. O(n + d log d) for d distinct values.
 *
 * @param values length n. Not changed.
 * @returns null where there are more than 16,384.
 * @example distinctValues(Float64Array.of(2, 1, 2)); // values 1, 2; counts 1, 2; codes 1, 0, 1
 */
export function distinctValues(values: Float64Array): DistinctValues | null {
  const table = createTable(values);
  const codes = new Int32Array(values.length);
  for (let row = 0; row < values.length; row++) {
    const slot = findSlot(table, values[row], hashOf(table.words, row));
    let code = table.slots[slot] - 1;
    if (code < 0) {
      if (table.count === table.known.length) return null;
      code = table.count++;
      table.known[code] = values[row];
      table.slots[slot] = code + 1;
    }
    codes[row] = code;
  }
  return inOrder(table, codes);
}

type Table = { slots: Int32Array; known: Float64Array; count: number; words: Uint32Array };

function createTable(values: Float64Array): Table {
  const most = Math.min(values.length, mostDistinct);
  let slots = 16;
  while (slots < 2 * most) slots *= 2;
  return {
    slots: new Int32Array(slots), known: new Float64Array(most), count: 0,
    words: new Uint32Array(values.buffer, values.byteOffset, 2 * values.length),
  };
}

/**
 * From the bits of the row's value, but for zero, which has two patterns. Whole numbers differ in a few high bits only, so bits
 * are shifted down before each multiplication (Appleby's finaliser of MurmurHash3).
 */
function hashOf(words: Uint32Array, row: number): number {
  const low = words[2 * row];
  const high = words[2 * row + 1];
  if (low === 0 && (high & 0x7fffffff) === 0) return 0;
  let hash = low ^ high ^ (high >>> 16);
  hash = Math.imul(hash ^ (hash >>> 16), 0x85ebca6b);
  hash = Math.imul(hash ^ (hash >>> 13), 0xc2b2ae35);
  return (hash ^ (hash >>> 16)) >>> 0;
}

/** The slot of a value, or the empty one where it belongs. */
function findSlot({ slots, known }: Table, value: number, hash: number): number {
  const mask = slots.length - 1;
  let slot = hash & mask;
  while (slots[slot] !== 0 && known[slots[slot] - 1] !== value) slot = (slot + 1) & mask;
  return slot;
}

function inOrder(table: Table, codes: Int32Array): DistinctValues {
  const values = table.known.slice(0, table.count).sort();
  const position = new Int32Array(table.count);
  const words = new Uint32Array(values.buffer, values.byteOffset, 2 * values.length);
  for (let k = 0; k < values.length; k++) position[table.slots[findSlot(table, values[k], hashOf(words, k))] - 1] = k;
  const counts = new Float64Array(table.count);
  for (let row = 0; row < codes.length; row++) {
    const code = position[codes[row]];
    codes[row] = code;
    counts[code]++;
  }
  return { values, counts, codes };
}
