/** What a product costs and sells at from a week on. Cost is net of tax; the regular price includes it. */
export type PriceTerm = {
  /** Weeks since the first week of the three years. */
  fromWeek: number;
  unitCost: number;
  regularPrice: number;
  /** A share: 0.07 is 7 %. */
  taxRate: number;
};

type TermLine = [fromWeek: number, unitCost: number, regularPrice: number];

/** The rate on household goods went up in the second year; food and drink kept theirs. */
const householdRateRise = { week: 83, before: 0.19, after: 0.2 };

const drink = (lines: TermLine[]) => terms(lines, 0.19);
const food = (lines: TermLine[]) => terms(lines, 0.07);

function terms(lines: TermLine[], taxRate: number): PriceTerm[] {
  return lines.map(([fromWeek, unitCost, regularPrice]) => ({ fromWeek, unitCost, regularPrice, taxRate }));
}

function household(lines: TermLine[]): PriceTerm[] {
  const { week, before, after } = householdRateRise;
  const earlier = terms(lines.filter(([fromWeek]) => fromWeek < week), before);
  const later = terms(lines.filter(([fromWeek]) => fromWeek >= week), after);
  const unchanged = { ...earlier[earlier.length - 1], fromWeek: week, taxRate: after };
  return later.some(({ fromWeek }) => fromWeek === week) ? [...earlier, ...later] : [...earlier, unchanged, ...later];
}

/** Costs and regular prices over the three years, by product. */
export const priceHistories: Record<string, PriceTerm[]> = {
  P101: drink([[0, 0.79, 1.69], [38, 0.81, 1.75], [97, 0.84, 1.79]]),
  P102: drink([[0, 0.81, 1.75], [52, 0.85, 1.85], [110, 0.84, 1.79]]),
  P103: drink([[0, 1.14, 2.59], [31, 1.17, 2.69], [88, 1.14, 2.55], [131, 1.18, 2.65]]),
  P201: food([[0, 1.81, 3.39], [44, 1.87, 3.49], [101, 1.92, 3.59]]),
  P202: food([[0, 1.51, 2.89], [61, 1.55, 2.99], [120, 1.53, 2.95]]),
  P203: food([[0, 2.22, 4.19], [35, 2.29, 4.29], [92, 2.41, 4.49], [139, 2.36, 4.35]]),
  P301: food([[0, 3.71, 5.99], [28, 3.94, 6.29], [73, 4.12, 6.59], [118, 3.98, 6.35]]),
  P302: food([[0, 1.61, 2.95], [66, 1.58, 2.89], [124, 1.67, 3.05]]),
  P303: food([[0, 1.74, 3.25], [57, 1.78, 3.35], [112, 1.81, 3.29]]),
  P401: food([[0, 1.41, 2.09], [22, 1.46, 2.19], [64, 1.55, 2.29], [103, 1.47, 2.19], [141, 1.43, 2.15]]),
  P402: food([[0, 7.52, 12.1], [48, 7.68, 12.4], [107, 7.86, 12.7]]),
  P403: food([[0, 0.82, 1.49], [70, 0.84, 1.55], [127, 0.83, 1.49]]),
  P501: food([[0, 0.63, 1.25], [41, 0.65, 1.29], [115, 0.66, 1.35]]),
  P502: food([[0, 1.14, 2.19], [78, 1.19, 2.29], [133, 1.16, 2.25]]),
  P503: food([[0, 0.96, 1.85], [33, 0.99, 1.89], [95, 1.03, 1.95]]),
  P601: household([[0, 3.42, 7.29], [54, 3.52, 7.49], [109, 3.66, 7.75]]),
  P602: household([[0, 0.73, 1.65], [83, 0.75, 1.69], [129, 0.76, 1.72]]),
  P603: household([[0, 1.42, 3.09], [46, 1.48, 3.19], [104, 1.52, 3.29]]),
};
