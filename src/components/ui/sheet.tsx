import type { ComponentProps, ReactNode } from "react";
import { classNames } from "@/lib/class-names";

type SheetProps = ComponentProps<"section"> & {
  heading?: ReactNode;
  /** Stands at the heading's right. */
  actions?: ReactNode;
  /** Contents reach the edges, as a table or lanes do. */
  flush?: boolean;
};

/** A white card with a hairline: the ground of all contents. */
export const Sheet = ({ heading, actions, flush = false, className, children, ...rest }: SheetProps) => (
  <section
    {...rest}
    className={classNames(
      "rounded-lg border border-hairline bg-sheet print:break-inside-avoid",
      !flush && "p-4 sm:p-5",
      className,
    )}
  >
    {(heading || actions) && (
      <div className={classNames("mb-3 flex items-start justify-between gap-4", flush && "px-4 pt-4 sm:px-5")}>
        {heading && <h2 className="text-base font-semibold text-ink">{heading}</h2>}
        {actions && <div className="flex flex-wrap items-center justify-end gap-2">{actions}</div>}
      </div>
    )}
    {children}
  </section>
);
