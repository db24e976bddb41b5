import { useMemo } from "react";
import { useChainFormat } from "@/lib/format/chain-format";
import { countOf } from "@/lib/format/number";
import { ChartFrame } from "../frame/chart-frame";
import { countStates, coverageRows } from "./coverage-data";
import type { CellPlace, CoverageStore } from "./coverage-data";
import { CoverageGrid } from "./coverage-grid";
import { CoverageLegend } from "./coverage-legend";
import { coverageTable } from "./coverage-table";

type CoverageMapProps = {
  title: string;
  /** First days, oldest first. */
  weeks: readonly string[];
  stores: readonly CoverageStore[];
  /** Names of the files that cells speak of. */
  files: readonly string[];
  /** A cell with a file was chosen. */
  onOpenFile: (file: number) => void;
};

const tallest = 640;

/** Stores by weeks: what of each is loaded, and what is not. */
export const CoverageMap = ({ title, weeks, stores, files, onOpenFile }: CoverageMapProps) => {
  const format = useChainFormat();
  const rows = useMemo(() => coverageRows(stores), [stores]);
  const counts = useMemo(() => countStates(stores), [stores]);
  const describe = ({ row, week }: CellPlace) => {
    const line = rows[row];
    if (line?.kind !== "store") return null;
    const { store } = line;
    const file = store.files[week] ?? null;
    return {
      store: store.name, state: store.states[week], file,
      week: `${format.weekSpan(weeks[week], weeks[week])} (${format.weekDays(weeks[week])})`,
      rows: store.rows[week] > 0 ? countOf(store.rows[week], "row") : null,
      fileName: file === null ? null : files[file],
    };
  };
  return (
    <ChartFrame
      title={title}
      table={() => coverageTable(stores, weeks)}
      height={tallest}
      legend={<CoverageLegend counts={counts} />}
    >
      <CoverageGrid
        title={title}
        rows={rows}
        numbers={weeks.map((week) => format.weekNumberAndYear(week))}
        describe={describe}
        onOpenFile={onOpenFile}
        maxHeight={tallest}
      />
    </ChartFrame>
  );
};
