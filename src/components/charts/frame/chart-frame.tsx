import { useRef } from "react";
import type { ReactNode } from "react";
import { classNames } from "@/lib/class-names";
import { ChartMenu } from "./chart-menu";
import { ChartNumbers } from "./chart-numbers";
import type { ChartTable } from "./chart-table";
import { useChartFrame } from "./use-chart-frame";

type ChartFrameProps = {
  /** Says what the chart shows, as a sentence without its full stop. */
  title: string;
  /** The title as it stands on the page, when it is more than text. */
  heading?: ReactNode;
  table: () => ChartTable;
  height: number;
  legend?: ReactNode;
  className?: string;
  children: ReactNode;
};

/** Around every chart: its title, its numbers one key away (T), and its picture and file. */
export const ChartFrame = ({ title, heading, table, height, legend, className, children }: ChartFrameProps) => {
  const plot = useRef<HTMLDivElement>(null);
  const frame = useChartFrame({ title, table, plot });
  return (
    <figure
      aria-labelledby={frame.titleId}
      tabIndex={0}
      onKeyDown={frame.onKeyDown}
      className={classNames("min-w-0 rounded-sm focus-visible:outline-offset-4", className)}
    >
      <figcaption className="mb-2 flex items-start justify-between gap-3">
        <span id={frame.titleId} className="min-w-0 text-muted">
          {heading ?? title}
        </span>
        <span className="-mt-0.5 -mr-1.5">
          <ChartMenu {...frame.menu} />
        </span>
      </figcaption>
      {frame.showsTable ? (
        <ChartNumbers title={title} table={table()} height={height} />
      ) : (
        <div ref={plot} className="relative">
          {children}
        </div>
      )}
      {legend && !frame.showsTable && <div className="mt-3">{legend}</div>}
    </figure>
  );
};
