import { useEffect } from "react";
import type { ReactNode } from "react";

type PageHeaderProps = {
  title: string;
  /** What stands before the name in the browser's tab, when the heading is more than text. */
  heading?: ReactNode;
  /** Facts about what is shown, one after another: separated by dots. */
  facts?: readonly ReactNode[];
  actions?: ReactNode;
};

/** A page's one heading, the facts under it, its actions at the right. */
export const PageHeader = ({ title, heading, facts = [], actions }: PageHeaderProps) => {
  useEffect(() => {
    document.title = `${title} · Shelftide`;
  }, [title]);
  return (
    <header className="mb-4 flex flex-wrap items-end justify-between gap-x-6 gap-y-3">
      <div className="min-w-0">
        <h1 className="text-xl font-semibold tracking-[-0.01em] text-ink">{heading ?? title}</h1>
        {facts.length > 0 && (
          <p className="mt-0.5 text-muted">
            {facts.map((fact, index) => (
              <span key={index}>
                {index > 0 && <span aria-hidden="true"> &nbsp;·&nbsp; </span>}
                {fact}
              </span>
            ))}
          </p>
        )}
      </div>
      {actions && <div className="flex flex-wrap items-end gap-3">{actions}</div>}
    </header>
  );
};
