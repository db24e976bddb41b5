import { ViewLinks } from "@/components/ui/view-links";
import { paths } from "@/lib/paths";

const views = [
  { label: "Stores", to: paths.catalogueStores.href() },
  { label: "Products", to: paths.catalogueProducts.href(), hasParts: true },
  { label: "Events", to: paths.catalogueEvents.href() },
  { label: "Temperatures", to: paths.catalogueTemperatures.href() },
];

/** The parts of the catalogue. */
export const CatalogueViews = () => <ViewLinks label="Catalogue" look="parts" views={views} />;
