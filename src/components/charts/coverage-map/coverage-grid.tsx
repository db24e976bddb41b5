import { useVirtualizer } from "@tanstack/react-virtual";
import { useId, useLayoutEffect, useRef, useState } from "react";
import { useElementWidth } from "@/lib/use-element-width";
import { HatchPattern } from "../parts/hatching";
import { axisHeight, CoverageAxis } from "./coverage-axis";
import { cellLabel, CellTip } from "./coverage-cell";
import type { CellFacts } from "./coverage-cell";
import type { CellPlace, CoverageRow } from "./coverage-data";
import { shareWidth } from "./coverage-layout";
import type { WeekNumber } from "./coverage-layout";
import { RowMarks } from "./coverage-marks";
import { RowName } from "./coverage-row-name";
import { useCellCursor } from "./use-cell-cursor";

type CoverageGridProps = {
  title: string;
  rows: readonly CoverageRow[];
  /** Of each week, oldest first. */
  numbers: readonly WeekNumber[];
  describe: (place: CellPlace) => CellFacts | null;
  onOpenFile: (file: number) => void;
  maxHeight: number;
};

const rowHeight = 22;
/** The scroll bar takes some of the width. */
const barWidth = 16;

/**
 * The cells themselves. For the keyboard and for screen readers it is a grid in which one cell is active and moved by the
 * arrow keys; only that cell stands in the page as such, so 500 stores stay quick.
 */
export const CoverageGrid = ({ title, rows, numbers, describe, onOpenFile, maxHeight }: CoverageGridProps) => {
  const id = useId();
  const [outer, outerWidth] = useElementWidth<HTMLDivElement>(900);
  const scroller = useRef<HTMLDivElement>(null);
  const [scrolled, setScrolled] = useState({ left: 0, top: 0 });
  // Where the picture is scrolled to matters only beside a cell that is looked at.
  const noteScroll = () => scroller.current && setScrolled({ left: scroller.current.scrollLeft, top: scroller.current.scrollTop });
  const isTall = rows.length * rowHeight + axisHeight > maxHeight;
  const { cell, namesWidth } = shareWidth({ weeks: numbers.length, width: outerWidth - 2 - (isTall ? barWidth : 0) });
  const virtualizer = useVirtualizer({
    count: rows.length, getScrollElement: () => scroller.current, estimateSize: () => rowHeight, overscan: 4,
    initialRect: { width: 900, height: maxHeight },
  });
  useLayoutEffect(() => {
    // The newest weeks are what people come for.
    if (scroller.current) scroller.current.scrollLeft = scroller.current.scrollWidth;
  }, [numbers.length, cell]);
  const onOpen = (at: CellPlace) => {
    const file = describe(at)?.file ?? null;
    if (file !== null) onOpenFile(file);
  };
  const cursor = useCellCursor({ scroller, rows, weeks: numbers.length, cell, rowHeight, namesWidth, onOpen, onLook: noteScroll });
  const { place } = cursor;
  const facts = place && describe(place);
  const tipX = place ? namesWidth + (place.week + 0.5) * cell - scrolled.left : 0;

  return (
    <div ref={outer} className="relative">
      <div
        {...cursor.grid}
        ref={scroller}
        role="grid"
        aria-label={`${title}. Arrow keys move from cell to cell, Enter opens the file.`}
        aria-rowcount={rows.length}
        aria-colcount={numbers.length}
        aria-activedescendant={facts ? `${id}-cell` : undefined}
        tabIndex={0}
        onScroll={() => place && noteScroll()}
        style={{ maxHeight }}
        className="relative overflow-auto rounded-sm border border-hairline focus-visible:-outline-offset-2"
      >
        <div aria-hidden="true" className="sticky top-0 z-20 flex w-max min-w-full border-b border-hairline bg-sheet">
          <CoverageAxis numbers={numbers} cell={cell} />
          <div
            className="sticky left-0 z-10 -order-1 shrink-0 border-r border-hairline bg-sheet px-3 pt-1.5 text-sm text-muted"
            style={{ width: namesWidth, height: axisHeight }}
          >
            Stores
          </div>
        </div>
        <div
          {...cursor.cells}
          className="relative min-w-full"
          style={{ width: namesWidth + numbers.length * cell, height: virtualizer.getTotalSize() }}
        >
          <svg width="0" height="0" className="absolute" aria-hidden="true">
            <defs>
              <HatchPattern id={`${id}-hatch`} />
            </defs>
          </svg>
          {virtualizer.getVirtualItems().map(({ index, start }) => {
            const row = rows[index];
            return (
              <div
                key={index}
                aria-hidden="true"
                className="absolute left-0 flex w-full"
                style={{ top: start, height: rowHeight }}
              >
                {row.kind === "store" ? (
                  <RowMarks store={row.store} cell={cell} height={rowHeight} hatch={`${id}-hatch`} />
                ) : (
                  <div className="flex-1 border-b border-hairline" />
                )}
                <RowName row={row} width={namesWidth} height={rowHeight} isLookedAt={place?.row === index} />
              </div>
            );
          })}
          {facts && place && (
            <div role="row" aria-rowindex={place.row + 1}>
              <div
                role="gridcell"
                id={`${id}-cell`}
                aria-colindex={place.week + 1}
                aria-label={cellLabel(facts)}
                className="pointer-events-none absolute rounded-xs border-2 border-ink"
                style={{ left: namesWidth + place.week * cell - 1, top: place.row * rowHeight, width: cell + 2, height: rowHeight }}
              />
            </div>
          )}
        </div>
      </div>
      {facts && place && (
        <CellTip
          facts={facts}
          x={tipX}
          y={Math.max(36, axisHeight + (place.row + 0.5) * rowHeight - scrolled.top)}
          side={tipX > outerWidth / 2 ? "left" : "right"}
        />
      )}
    </div>
  );
};
