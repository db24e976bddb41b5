import { CircleAlert } from "lucide-react";
import type { LayoutPreview } from "@shared/contract/saved-layouts";
import { promotionColumn } from "@shared/contract/layouts";
import { classNames } from "@/lib/class-names";
import { formatNumber } from "@/lib/format/number";
import { columnLabel } from "../../view/column-labels";

type Row = LayoutPreview["rows"][number];

/** A word for the whole promotion is split onto three columns; its problem stands at the first of them. */
const problemAt = ({ problems }: Row, column: string) =>
  problems.find((problem) => problem.column === column) ??
  (column === "feature" ? problems.find((problem) => problem.column === promotionColumn) : undefined);

const sentenceOf = ({ rows, missing }: LayoutPreview): string => {
  const bad = rows.filter(({ problems }) => problems.length > 0).length;
  const all = formatNumber(rows.length);
  if (bad === 0 && missing.length > 0) return `What has been found so far can be read in all of the first ${all} rows.`;
  if (bad === 0) return `All of the first ${all} rows can be read.`;
  return `In ${formatNumber(bad)} of the first ${all} rows a value cannot be read so; it is marked.`;
};

/** The same rows as they will be read, in our columns; values that cannot be read are marked. */
export const ReadRows = ({ preview, isBehind }: { preview: LayoutPreview; isBehind: boolean }) => (
  <div className={classNames("transition-opacity", isBehind && "opacity-60")} aria-busy={isBehind}>
    <p role="status" className="mb-2 text-sm text-muted">
      {isBehind ? "Reading the rows this way …" : sentenceOf(preview)}
    </p>
    <div role="region" aria-label="The same rows as they will be read" tabIndex={0} className="max-h-72 overflow-auto rounded-md border border-hairline">
      <table className="w-full border-separate border-spacing-0 text-sm">
        <caption className="sr-only">The same rows as they will be read</caption>
        <thead className="sticky top-0 z-10 bg-sheet text-left">
          <tr>
            <th scope="col" className="sticky left-0 border-r border-b border-hairline bg-sheet px-3 py-1.5 font-medium text-muted">line</th>
            {preview.columns.map((column) => (
              <th key={column} scope="col" className="border-b border-hairline px-3 py-1.5 font-semibold whitespace-nowrap text-accent">
                {columnLabel(column)}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {preview.rows.map((row) => (
            <tr key={row.line}>
              <td className="sticky left-0 border-r border-hairline bg-sheet px-3 py-1 text-muted">{row.line}</td>
              {preview.columns.map((column, at) => (
                <ReadCell key={column} value={row.values[at] ?? ""} problem={problemAt(row, column)} />
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  </div>
);

const ReadCell = ({ value, problem }: { value: string; problem: Row["problems"][number] | undefined }) => {
  if (!problem) return <td className="px-3 py-1 whitespace-nowrap">{value}</td>;
  return (
    <td className="bg-danger-soft px-3 py-1 text-danger">
      <span className="flex items-start gap-1.5">
        <CircleAlert className="mt-0.5 size-3.5 shrink-0" aria-hidden="true" />
        <span>
          <span className="font-medium break-all">{problem.value}</span>
          <span className="block min-w-44 text-xs">{problem.reason}</span>
        </span>
      </span>
    </td>
  );
};
