import { useEffect, useRef } from "react";
import { writeCell } from "./chart-table";
import type { ChartTable } from "./chart-table";

/** A chart's numbers as a plain table, in the chart's place. */
export const ChartNumbers = ({ title, table, height }: { title: string; table: ChartTable; height: number }) => {
  const region = useRef<HTMLDivElement>(null);
  useEffect(() => region.current?.focus({ preventScroll: true }), []);
  return (
    <div
      ref={region}
      role="region"
      aria-label={`Numbers of: ${title}`}
      tabIndex={0}
      style={{ maxHeight: Math.max(height, 240) }}
      className="overflow-auto rounded-sm border border-hairline"
    >
      <table className="w-full border-separate border-spacing-0 text-sm">
        <caption className="sr-only">{title}</caption>
        <thead className="sticky top-0 bg-sheet">
          <tr>
            {table.columns.map((column, index) => (
              <th
                key={column}
                scope="col"
                className={`border-b border-hairline px-3 py-1.5 font-medium text-muted ${side(table, index)}`}
              >
                {column}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {table.rows.map((row, rowIndex) => (
            <tr key={rowIndex}>
              {row.map((cell, index) => (
                <td key={index} className={`px-3 py-1 ${side(table, index)}`}>
                  {writeCell(table, cell, index)}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
};

const side = (table: ChartTable, column: number) =>
  typeof table.rows.find((row) => row[column] !== null)?.[column] === "number" ? "text-right" : "text-left";
