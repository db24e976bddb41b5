import { NavLink } from "react-router-dom";
import { classNames } from "@/lib/class-names";
import { paths } from "@/lib/paths";

const views: { label: string; to: string; hasParts?: boolean }[] = [
  { label: "Files", to: paths.extracts.href() },
  { label: "Coverage", to: paths.coverage.href() },
  { label: "Saved layouts", to: paths.layouts.href() },
  { label: "Catalogue", to: paths.catalogue.href(), hasParts: true },
];

const linkStyle = ({ isActive }: { isActive: boolean }) =>
  classNames(
    "inline-flex h-9 items-center border-b-2 font-medium transition-colors",
    isActive ? "border-accent text-ink" : "border-transparent text-muted hover:text-ink",
  );

/** The pages about what arrived: the files, what they cover, and how they are read. */
export const ExtractsViews = () => (
  <nav aria-label="Extracts" className="mb-5 border-b border-hairline print:hidden">
    <ul className="-mb-px flex gap-6 overflow-x-auto">
      {views.map(({ label, to, hasParts = false }) => (
        <li key={to} className="shrink-0">
          <NavLink to={to} end={!hasParts} className={linkStyle}>
            {label}
          </NavLink>
        </li>
      ))}
    </ul>
  </nav>
);
