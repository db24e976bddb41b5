import { useRef } from "react";
import type { ReactNode } from "react";
import { ChartMenu } from "../frame/chart-menu";
import { ChartNumbers } from "../frame/chart-numbers";
import type { ChartTable } from "../frame/chart-table";
import { useChartFrame } from "../frame/use-chart-frame";
import type { DriverColour } from "../drivers";

const laneStyle =
  "group/lane grid grid-cols-[1fr_auto] border-b border-hairline first:rounded-t-lg " +
  "last:rounded-b-lg last:border-b-0 focus-visible:-outline-offset-2 lg:grid-cols-[11.5rem_minmax(0,1fr)_9.5rem]";

type LaneLayoutProps = {
  driver: DriverColour;
  /** "Price" */
  name: ReactNode;
  /** Says what the lane shows, for the table, the picture and screen readers. */
  title: string;
  value: ReactNode;
  detail?: ReactNode;
  effect?: ReactNode;
  table: () => ChartTable;
  height: number;
  children: ReactNode;
};

/** A lane's three parts: what it is set to, the curve, what that does. Narrow screens put the curve below. */
export const LaneLayout = (props: LaneLayoutProps) => {
  const { driver, name, title, value, detail, effect, table, height, children } = props;
  const plot = useRef<HTMLDivElement>(null);
  const frame = useChartFrame({ title, table, plot });
  return (
    <figure
      data-driver={driver}
      aria-labelledby={frame.titleId}
      tabIndex={0}
      onKeyDown={frame.onKeyDown}
      className={laneStyle}
    >
      <span id={frame.titleId} className="sr-only">
        {title}
      </span>
      <div className="min-w-0 p-4 pb-1 lg:border-r lg:border-hairline lg:pb-4">
        <div className="flex items-center gap-2">
          <span className="size-2.5 rounded-xs bg-driver" aria-hidden="true" />
          <span className="font-semibold">{name}</span>
          <span className="-my-1.5 lg:ml-auto">
            <ChartMenu {...frame.menu} />
          </span>
        </div>
        <div className="mt-1">{value}</div>
        {detail && <div className="mt-0.5 text-sm text-muted">{detail}</div>}
      </div>
      <div className="p-4 pb-1 lg:order-last lg:px-3.5 lg:border-l lg:border-hairline">{effect}</div>
      <div className="col-span-2 min-w-0 lg:col-span-1">
        {frame.showsTable ? (
          <div className="p-3">
            <ChartNumbers title={title} table={table()} height={height} />
          </div>
        ) : (
          <div ref={plot} className="relative">
            {children}
          </div>
        )}
      </div>
    </figure>
  );
};
