import type { Role } from "@shared/contract/permissions";

export type DemoPerson = { email: string; name: string; roles: Role[] };

/** Who works at Larkmoor; invented, like their addresses. The manager decides on every category. */
export const people = {
  data: { email: "data@larkmoor.example", name: "Oda Fenwright", roles: ["data-admin"] },
  planner: { email: "planner@larkmoor.example", name: "Ives Korrigan", roles: ["planner"] },
  manager: { email: "manager@larkmoor.example", name: "Tamsin Orrel", roles: ["category-manager"] },
  admin: { email: "admin@larkmoor.example", name: "Bram Hollis", roles: ["administrator"] },
} satisfies Record<string, DemoPerson>;

/** The password of all of them; such accounts exist in the embedded demo only. */
export const demoPassword = "shelftide-demo";

/** Larkmoor's settings, where they differ from a new installation's. */
export const chainSettings = {
  name: "Larkmoor Grocers",
  currency: "EUR",
  locale: "en-GB",
  timeZone: "Europe/London",
  calendar: "iso",
  weekStart: 1,
  temperatureUnit: "celsius",
} as const;
