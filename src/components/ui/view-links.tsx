import { NavLink } from "react-router-dom";
import { classNames } from "@/lib/class-names";

type View = {
  label: string;
  to: string;
  /** It stays marked on the pages below its own. */
  hasParts?: boolean;
};

/** `pages` stand over a page's heading, `parts` under it, within one of those pages. */
type Look = "pages" | "parts";

const looks: Record<Look, { frame: string; list: string; link: string; here: string; elsewhere: string }> = {
  pages: {
    frame: "mb-5 border-b border-hairline",
    list: "-mb-px gap-6",
    link: "h-9 border-b-2",
    here: "border-accent text-ink",
    elsewhere: "border-transparent text-muted hover:text-ink",
  },
  parts: {
    frame: "mb-4",
    list: "-mx-1 gap-1 px-1",
    link: "h-8 rounded-sm px-3",
    here: "bg-accent-soft text-accent",
    elsewhere: "text-muted hover:bg-hover hover:text-ink",
  },
};

type ViewLinksProps = { label: string; look: Look; views: readonly View[] };

/** Links between pages that belong together; the one people are on is marked. */
export const ViewLinks = ({ label, look, views }: ViewLinksProps) => {
  const { frame, list, link, here, elsewhere } = looks[look];
  const style = ({ isActive }: { isActive: boolean }) =>
    classNames("inline-flex items-center font-medium transition-colors", link, isActive ? here : elsewhere);
  return (
    <nav aria-label={label} className={classNames(frame, "print:hidden")}>
      <ul className={classNames("flex overflow-x-auto", list)}>
        {views.map(({ label: name, to, hasParts = false }) => (
          <li key={to} className="shrink-0">
            <NavLink to={to} end={!hasParts} className={style}>
              {name}
            </NavLink>
          </li>
        ))}
      </ul>
    </nav>
  );
};
