import { addDays, dayNumber, type Day } from "@shared/calendar";
import type { CatalogueEvent } from "@shared/contract/catalogue-events";

/** A part of an event within a row of weeks. */
export type EventBar = {
  event: CatalogueEvent;
  /** Shares of the width of the row's weeks. */
  left: number;
  width: number;
  /** The same, for its name: to the next bar of the lane, or to the row's end. */
  room: number;
  /** Bars that share days lie in different lanes. */
  lane: number;
  /** Whether it goes on in the row before or after. */
  continuesBefore: boolean;
  continuesAfter: boolean;
};

export type WeekRow = { weeks: Day[]; bars: EventBar[]; lanes: number };

type Calendar = { weeks: readonly Day[]; events: readonly CatalogueEvent[]; weeksInRow: number };

/**
 * A year's weeks in rows, and its events as bars over them, to the day. Of a quarter's 13 weeks a row a year of 53 has its
 * last week in the fourth row too.
 */
export const weekRows = ({ weeks, events, weeksInRow }: Calendar): WeekRow[] => {
  const rowCount = Math.max(1, Math.floor(weeks.length / weeksInRow));
  const rest = weeks.length - rowCount * weeksInRow;
  const isJoined = rest > 0 && rest < weeksInRow / 4;
  const starts = Array.from({ length: isJoined ? rowCount : Math.ceil(weeks.length / weeksInRow) }, (_, row) => row * weeksInRow);
  return starts.map((start, row) => {
    const own = weeks.slice(start, row === starts.length - 1 ? weeks.length : start + weeksInRow);
    return rowOf(own, events);
  });
};

/** How many columns the widest row has: all rows share it, so that a week is as wide everywhere. */
export const columnsOfRows = (rows: readonly WeekRow[]): number => Math.max(1, ...rows.map(({ weeks }) => weeks.length));

const rowOf = (weeks: Day[], events: readonly CatalogueEvent[]): WeekRow => {
  const [first, end] = [dayNumber(weeks[0]), dayNumber(addDays(weeks[weeks.length - 1], 7))];
  const days = end - first;
  const laneEnds: number[] = [];
  const bars = events
    .filter(({ firstDay, lastDay }) => dayNumber(firstDay) < end && dayNumber(lastDay) >= first)
    .map((event) => {
      const from = Math.max(first, dayNumber(event.firstDay));
      const to = Math.min(end, dayNumber(event.lastDay) + 1);
      const free = laneEnds.findIndex((taken) => taken <= from);
      const lane = free === -1 ? laneEnds.length : free;
      laneEnds[lane] = to;
      return {
        event, lane, left: (from - first) / days, width: (to - from) / days, room: 0,
        continuesBefore: dayNumber(event.firstDay) < first, continuesAfter: dayNumber(event.lastDay) >= end,
      };
    });
  const roomOf = ({ left, lane }: EventBar) => Math.min(1, ...bars.filter((other) => other.lane === lane && other.left > left).map((other) => other.left)) - left;
  return { weeks, bars: bars.map((bar) => ({ ...bar, room: roomOf(bar) })), lanes: Math.max(1, laneEnds.length) };
};
