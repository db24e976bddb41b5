import { answerRequests, type refusal } from "./answer";
import { sessionWith } from "./extract";

export const stores = [
  { code: "S1", name: "Harbour Street", region: "coast", opened: "2015-03-02", closed: null, version: "one" },
  { code: "S2", name: "Mill Lane", region: "town", opened: null, closed: "2026-05-31", version: "two" },
];
const product = {
  code: "P1", name: "Oat bar", gtin: "2000000000015", brand: "Larkfield", category: "snacks", categoryName: "Snacks", soldByWeight: false,
  replaces: null, replacesSizeRatio: null, unitCost: 0.8, regularPrice: 1.79, taxRate: 0.21, version: "p1",
};
const later = { ...product, code: "P2", name: "Oat bar, large", replaces: "P1", replacesSizeRatio: 0.75, version: "p2" };
const fair = { id: 7, code: "fair", name: "Summer fair", firstDay: "2026-06-05", lastDay: "2026-06-07", region: "coast", version: "e7" };
const week = (day: string, part: object = {}) => ({ week: day, temperatureC: null, source: null, version: null, normalC: 14, lowC: 11, highC: 17, ...part });

type Sent = { method: string; address: string; headers: Record<string, string>; body: unknown };
type Refuse = (sent: Sent) => ReturnType<typeof refusal> | undefined;

/** A server with a small catalogue; it notes what it is sent, and refuses what it is told to. */
export const serving = ({ permissions = ["read", "catalogue:write"], refuse, answers = {} }: { permissions?: string[]; refuse?: Refuse; answers?: Record<string, () => unknown> } = {}) => {
  const sent: Sent[] = [];
  const known: Record<string, () => unknown> = {
    "/api/session": () => sessionWith(permissions),
    "/api/stores": () => ({ items: stores }),
    "/api/products": () => ({ items: [product, later] }),
    "/api/categories": () => ({ items: [{ code: "snacks", name: "Snacks", products: 2, version: "c" }] }),
    "/api/events": () => ({ items: [fair] }),
    "/api/products/P1/terms": () => ({ items: [{ validFrom: "1970-01-01", unitCost: 0.8, regularPrice: 1.79, taxRate: 0.21, version: "t1" }] }),
    "/api/funding": () => ({ items: [] }),
    "/api/listings": () => ({ items: [{ product: "P1", store: "S1", firstDay: "2026-01-05", lastDay: null, version: "l1" }], nextCursor: null }),
    "/api/catalogue-history": () => ({ items: [], nextCursor: null }),
    "/api/temperatures/region/coast": () => ({ items: [week("2026-06-01", { temperatureC: 15.5, source: "region", version: "w1" }), week("2026-06-08")], firstKnown: "2026-06-01", lastKnown: "2026-06-01" }),
    ...answers,
  };
  answerRequests((address, { method = "GET", body, headers }) => {
    const [path] = address.split("?");
    if (method === "GET") return path in known ? { status: 200, body: known[path]() } : { status: 404, body: {} };
    const one = { method, address, headers: headers as Record<string, string>, body: body === undefined ? undefined : JSON.parse(String(body)) };
    sent.push(one);
    const refused = refuse?.(one);
    if (refused) return refused;
    return method === "DELETE" ? { status: 204 } : { status: method === "POST" ? 201 : 200, body: { ...stores[0], ...product, ...fair, ...week("2026-06-08"), entered: 2, validFrom: "2026-07-01", version: "new", ...(one.body as object) } };
  });
  return sent;
};
