import { ViewLinks } from "@/components/ui/view-links";
import { paths } from "@/lib/paths";

const views = [
  { label: "Files", to: paths.extracts.href() },
  { label: "Coverage", to: paths.coverage.href() },
  { label: "Saved layouts", to: paths.layouts.href() },
  { label: "Catalogue", to: paths.catalogue.href(), hasParts: true },
];

/** The pages about what arrived: the files, what they cover, and how they are read. */
export const ExtractsViews = () => <ViewLinks label="Extracts" look="pages" views={views} />;
