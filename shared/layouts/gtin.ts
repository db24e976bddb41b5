export { isGtin } from "../contract/gtin";
