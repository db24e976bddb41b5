import { NavLink } from "react-router-dom";
import { classNames } from "@/lib/class-names";
import { paths } from "@/lib/paths";

const views = [
  { label: "Stores", to: paths.catalogueStores.href() },
  { label: "Products", to: paths.catalogueProducts.href() },
  { label: "Events", to: paths.catalogueEvents.href() },
  { label: "Temperatures", to: paths.catalogueTemperatures.href() },
];

const linkStyle = ({ isActive }: { isActive: boolean }) =>
  classNames(
    "inline-flex h-8 items-center rounded-sm px-3 font-medium transition-colors",
    isActive ? "bg-accent-soft text-accent" : "text-muted hover:bg-hover hover:text-ink",
  );

/** The parts of the catalogue. */
export const CatalogueViews = () => (
  <nav aria-label="Catalogue" className="mb-4 print:hidden">
    <ul className="-mx-1 flex gap-1 overflow-x-auto px-1">
      {views.map(({ label, to }) => (
        <li key={to} className="shrink-0">
          <NavLink to={to} className={linkStyle}>
            {label}
          </NavLink>
        </li>
      ))}
    </ul>
  </nav>
);
