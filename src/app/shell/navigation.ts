import { paths } from "@/lib/paths";

/** The pages of the top bar, in the order of the week's work. A page joins when it exists. */
export const navigation = [
  { label: "Extracts", to: paths.extracts.href() },
  { label: "Drivers", to: paths.drivers.href() },
  { label: "Stores", to: paths.stores.href() },
  { label: "Scenarios", to: paths.scenarios.href() },
] as const;
