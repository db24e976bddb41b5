import { useState } from "react";
import type { KeyboardEvent, PointerEvent, RefObject } from "react";
import { axisHeight } from "./coverage-axis";
import type { CellPlace, CoverageRow } from "./coverage-data";
import { moveCell } from "./coverage-layout";

type CellCursorOptions = {
  scroller: RefObject<HTMLElement | null>;
  rows: readonly CoverageRow[];
  weeks: number;
  /** Pixels of a cell's width, of a row and of the names before the cells. */
  cell: number;
  rowHeight: number;
  namesWidth: number;
  onOpen: (place: CellPlace) => void;
  /** Another cell is looked at. */
  onLook: () => void;
};

/** Which cell is looked at, by pointer, finger or keyboard. */
export const useCellCursor = (options: CellCursorOptions) => {
  const { scroller, rows, weeks, cell, rowHeight, namesWidth, onOpen, onLook } = options;
  const [place, setOwnPlace] = useState<CellPlace | null>(null);
  const setPlace = (next: CellPlace | null) => {
    setOwnPlace(next);
    if (next) onLook();
  };
  const isAt = (other: CellPlace | null) => other?.row === place?.row && other?.week === place?.week;

  const bringIntoView = ({ row, week }: CellPlace) => {
    const view = scroller.current;
    if (!view) return;
    const [left, top] = [week * cell, row * rowHeight];
    const [right, bottom] = [left + cell + namesWidth - view.clientWidth, top + rowHeight + axisHeight - view.clientHeight];
    // The heading of a region comes along with its first store.
    view.scrollTo?.(Math.max(right, Math.min(left, view.scrollLeft)), Math.max(bottom, Math.min(top - rowHeight, view.scrollTop)));
  };
  const onKeyDown = (event: KeyboardEvent) => {
    if (event.ctrlKey || event.metaKey || event.altKey) return;
    if (event.key === "Enter" && place) return onOpen(place);
    if (event.key === "Escape") return setPlace(null);
    const from = place ?? { row: rows.findIndex(({ kind }) => kind === "store"), week: weeks - 1 };
    const moved = moveCell(from, event.key, { rows, weeks });
    if (!moved) return;
    event.preventDefault();
    const next = place ? moved : from;
    bringIntoView(next);
    setPlace(next);
  };
  const placeUnder = ({ clientX, clientY, currentTarget }: PointerEvent): CellPlace | null => {
    const box = currentTarget.getBoundingClientRect();
    const row = Math.floor((clientY - box.top) / rowHeight);
    const week = Math.floor((clientX - box.left - namesWidth) / cell);
    const isUnderNames = clientX - (scroller.current?.getBoundingClientRect().left ?? 0) < namesWidth;
    return !isUnderNames && rows[row]?.kind === "store" && week >= 0 && week < weeks ? { row, week } : null;
  };
  return {
    place,
    grid: { onKeyDown, onBlur: () => setPlace(null) },
    cells: {
      onPointerMove: (event: PointerEvent) => {
        const next = placeUnder(event);
        if (event.pointerType === "mouse" && !isAt(next)) setPlace(next);
      },
      onPointerLeave: (event: PointerEvent) => event.pointerType === "mouse" && setPlace(null),
      /** A finger first looks, and opens with the second tap. */
      onPointerUp: (event: PointerEvent) => {
        const next = placeUnder(event);
        if (next && (event.pointerType === "mouse" || isAt(next))) onOpen(next);
        else setPlace(next);
      },
    },
  };
};
