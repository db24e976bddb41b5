import { addressOf } from "./address";

type DriversView = { product?: string; store?: string; weeks?: string };
type StoresView = { product?: string; driver?: string; store?: string; anchor?: number };
type CoverageView = { until?: string; weeks?: string };

/** Each page's path, and the one way to build a link to it. The address holds all that a colleague needs to see the same. */
export const paths = {
  home: { path: "/", href: () => "/" },
  signIn: {
    path: "/sign-in",
    href: (returnTo?: string) => addressOf("/sign-in", { returnTo: returnTo === "/" ? undefined : returnTo }),
  },
  password: { path: "/password", href: () => "/password" },
  notices: { path: "/notices", href: () => "/notices" },
  settings: { path: "/settings", href: () => "/settings" },
  extracts: { path: "/extracts", href: () => "/extracts" },
  coverage: { path: "/extracts/coverage", href: (view: CoverageView = {}) => addressOf("/extracts/coverage", view) },
  layouts: { path: "/extracts/layouts", href: () => "/extracts/layouts" },
  catalogue: { path: "/extracts/catalogue", href: () => "/extracts/catalogue" },
  catalogueStores: { path: "/extracts/catalogue/stores", href: () => "/extracts/catalogue/stores" },
  catalogueProducts: { path: "/extracts/catalogue/products", href: () => "/extracts/catalogue/products" },
  catalogueProduct: {
    path: "/extracts/catalogue/products/:productCode",
    href: (code: string) => `/extracts/catalogue/products/${encodeURIComponent(code)}`,
  },
  catalogueEvents: { path: "/extracts/catalogue/events", href: () => "/extracts/catalogue/events" },
  catalogueTemperatures: { path: "/extracts/catalogue/temperatures", href: () => "/extracts/catalogue/temperatures" },
  extract: { path: "/extracts/:extractId", href: (extractId: string) => `/extracts/${encodeURIComponent(extractId)}` },
  drivers: { path: "/drivers", href: (view: DriversView = {}) => addressOf("/drivers", view) },
  stores: { path: "/stores", href: (view: StoresView = {}) => addressOf("/stores", view) },
  scenarios: { path: "/scenarios", href: () => "/scenarios" },
  newScenario: {
    path: "/scenarios/new",
    href: (view: { product?: string; store?: string } = {}) => addressOf("/scenarios/new", view),
  },
  scenario: {
    path: "/scenarios/:scenarioId",
    href: (scenarioId: string) => `/scenarios/${encodeURIComponent(scenarioId)}`,
  },
} as const;

/** A return address is followed only within this site. */
export const safeReturn = (address: string | null): string =>
  address && /^\/(?![/\\])/.test(address) ? address : paths.home.href();
