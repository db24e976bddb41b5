import { useCallback, useId, useState } from "react";
import type { KeyboardEvent, RefObject } from "react";
import { useStatusLine } from "@/components/ui/status-line";
import { fileNameOf, saveBlob, saveCsv } from "@/lib/download";
import type { ChartTable } from "./chart-table";
import { chartPicture } from "./chart-picture";

const isTyping = (target: EventTarget) =>
  target instanceof HTMLElement &&
  (target.isContentEditable || ["INPUT", "SELECT", "TEXTAREA"].includes(target.tagName));

type ChartFrameOptions = {
  title: string;
  /** Made only when it is asked for. */
  table: () => ChartTable;
  /** Holds the drawings. */
  plot: RefObject<HTMLElement | null>;
};

/** What every chart can do beside being looked at. */
export const useChartFrame = ({ title, table, plot }: ChartFrameOptions) => {
  const [showsTable, setShowsTable] = useState(false);
  const titleId = useId();
  const status = useStatusLine();
  const toggleTable = useCallback(() => setShowsTable((shown) => !shown), []);
  const savePicture = async () => {
    if (!plot.current) return;
    try {
      saveBlob(await chartPicture({ title, plot: plot.current }), `${fileNameOf(title)}.png`);
    } catch {
      status.failed("This browser would not make the picture. The CSV holds the same numbers.");
    }
  };
  const onKeyDown = (event: KeyboardEvent) => {
    const modified = event.ctrlKey || event.metaKey || event.altKey;
    if (event.key.toLowerCase() !== "t" || modified || (isTyping(event.target) && !isRadio(event.target))) return;
    event.preventDefault();
    toggleTable();
  };
  return {
    titleId,
    showsTable,
    onKeyDown,
    menu: {
      title,
      showsTable,
      onToggleTable: toggleTable,
      onSavePicture: () => void savePicture(),
      onSaveCsv: () => saveCsv(table(), title),
    },
  };
};

const isRadio = (target: EventTarget) => target instanceof HTMLInputElement && target.type === "radio";
