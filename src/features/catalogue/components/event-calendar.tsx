import { useMemo } from "react";
import { parseISO, format as formatDate } from "date-fns";
import type { Day } from "@shared/calendar";
import type { CatalogueEvent } from "@shared/contract/catalogue-events";
import { classNames } from "@/lib/class-names";
import { useChainFormat } from "@/lib/format/chain-format";
import { useElementWidth } from "@/lib/use-element-width";
import { columnsOfRows, weekRows, type EventBar, type WeekRow } from "../view/event-bars";

const laneHeight = 34;
const narrowBelow = 560;
const wideFrom = 900;

type EventCalendarProps = {
  weeks: readonly Day[];
  events: readonly CatalogueEvent[];
  /** First day of the week that is now. */
  thisWeek: Day;
  onOpen: (id: number) => void;
};

/** A year by the chain's weeks, with events as bars over the days they last. */
export const EventCalendar = ({ weeks, events, thisWeek, onOpen }: EventCalendarProps) => {
  const [frame, width] = useElementWidth<HTMLDivElement>(1100);
  const weeksInRow = width >= wideFrom ? 13 : width >= narrowBelow ? 7 : 4;
  const rows = useMemo(() => weekRows({ weeks, events, weeksInRow }), [weeks, events, weeksInRow]);
  const columns = columnsOfRows(rows);
  return (
    <div ref={frame} className="flex flex-col gap-3">
      {rows.map((row) => (
        <Row key={row.weeks[0]} row={row} columns={columns} thisWeek={thisWeek} onOpen={onOpen} />
      ))}
    </div>
  );
};

type RowProps = { row: WeekRow; columns: number; thisWeek: Day; onOpen: (id: number) => void };

const Row = ({ row, columns, thisWeek, onOpen }: RowProps) => {
  const format = useChainFormat();
  const share = (weeks: number) => `${(weeks / columns) * 100}%`;
  return (
    <div className="border-t border-hairline pt-1.5">
      <div className="flex" aria-hidden="true">
        {row.weeks.map((week) => (
          <div
            key={week} style={{ width: share(1) }}
            className={classNames(
              "min-w-0 border-l border-hairline pl-1.5 text-xs leading-4",
              week === thisWeek ? "font-semibold text-accent" : "text-muted",
            )}
          >
            <span className="block truncate">wk {format.weekNumber(week)}</span>
            <span className="block truncate">{formatDate(parseISO(week), "d MMM")}</span>
          </div>
        ))}
      </div>
      <div className="relative" style={{ height: row.lanes * laneHeight + 6, width: share(row.weeks.length) }}>
        {row.weeks.map((week, index) => (
          <div
            key={week} aria-hidden="true" style={{ left: `${(index / row.weeks.length) * 100}%`, width: `${100 / row.weeks.length}%` }}
            className={classNames("absolute inset-y-0 border-l border-hairline", week === thisWeek && "bg-accent-soft/60")}
          />
        ))}
        {row.bars.map((bar) => (
          <Bar key={bar.event.id} bar={bar} onOpen={onOpen} />
        ))}
      </div>
    </div>
  );
};

const Bar = ({ bar, onOpen }: { bar: EventBar; onOpen: (id: number) => void }) => {
  const format = useChainFormat();
  const { event } = bar;
  const where = event.region ?? "whole chain";
  return (
    <button
      type="button" data-driver="event" onClick={() => onOpen(event.id)}
      aria-label={`${event.name}, ${where}, ${format.day(event.firstDay)} to ${format.day(event.lastDay)}`}
      title={`${event.name} · ${where}`}
      style={{ left: `${bar.left * 100}%`, width: `${bar.width * 100}%`, top: bar.lane * laneHeight + 4, height: laneHeight - 4 }}
      className="absolute text-left text-xs leading-4 hover:z-10 focus-visible:z-10"
    >
      <span
        className={classNames(
          "absolute inset-x-0 top-0 h-2.5 border border-driver",
          event.region === null ? "bg-driver" : "border-dashed bg-driver-soft",
          !bar.continuesBefore && "rounded-l-sm", !bar.continuesAfter && "rounded-r-sm",
          bar.continuesBefore && "border-l-0", bar.continuesAfter && "border-r-0",
        )}
      />
      <span className="absolute top-3 left-0 truncate" style={{ width: `${(bar.room / bar.width) * 100}%` }}>
        <span className="bg-sheet pr-1 font-medium text-driver-text">
          {event.name}
          {event.region !== null && <span className="font-normal"> · {event.region}</span>}
        </span>
      </span>
    </button>
  );
};
