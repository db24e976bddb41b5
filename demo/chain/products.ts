import { gtin13 } from "./gtin";
import { priceHistories, type PriceTerm } from "./price-histories";

export type ChainProduct = {
  code: string;
  gtin: string;
  name: string;
  brand: string;
  category: string;
  soldByWeight: boolean;
  /** Costs and regular prices over time, earliest first. */
  prices: PriceTerm[];
};

type ProductLine = [code: string, category: string, brand: string, rest: string, sold?: "by weight"];

const lines: ProductLine[] = [
  ["P101", "Soft drinks", "Pennyfold", "Lemonade 1.5 L"],
  ["P102", "Soft drinks", "Pennyfold", "Cola 1.5 L"],
  ["P103", "Soft drinks", "Tarnwell", "Spring Water 6 x 1.5 L"],
  ["P201", "Ice cream", "Frostwick", "Vanilla Ice Cream 900 ml"],
  ["P202", "Ice cream", "Frostwick", "Fruit Lollies 8 pack"],
  ["P203", "Ice cream", "Skerry Lane", "Chocolate Cones 6 pack"],
  ["P301", "Hot drinks", "Hallowday", "Ground Coffee 500 g"],
  ["P302", "Hot drinks", "Hallowday", "Breakfast Tea 80 bags"],
  ["P303", "Hot drinks", "Marlpit", "Drinking Chocolate 400 g"],
  ["P401", "Dairy", "Cleggdale", "Butter 250 g"],
  ["P402", "Dairy", "Cleggdale", "Hard Cheese, per kg", "by weight"],
  ["P403", "Dairy", "Sweetmere", "Natural Yogurt 500 g"],
  ["P501", "Pantry", "Oxbarrow", "Tomato Soup 400 g"],
  ["P502", "Pantry", "Oxbarrow", "Pasta Sauce 500 g"],
  ["P503", "Pantry", "Quillgrain", "Rolled Oats 1 kg"],
  ["P601", "Household", "Bramblewash", "Laundry Liquid 1.3 L"],
  ["P602", "Household", "Bramblewash", "Washing-up Liquid 500 ml"],
  ["P603", "Household", "Softfell", "Kitchen Roll 4 pack"],
];

/** The first nine digits of every product number: 20-29 is GS1's range for use inside one company. */
const numberPrefix = "204710000";

/** The 18 products followed, with invented brands. */
export const products: ChainProduct[] = lines.map(([code, category, brand, rest, sold]) => ({
  code,
  gtin: gtin13(numberPrefix + code.slice(1)),
  name: `${brand} ${rest}`,
  brand,
  category,
  soldByWeight: sold === "by weight",
  prices: priceHistories[code],
}));
