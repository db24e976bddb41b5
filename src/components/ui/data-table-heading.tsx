import { ArrowDown, ArrowUp } from "lucide-react";
import { classNames } from "@/lib/class-names";
import { columnClass } from "./data-table-columns";
import type { TableColumn } from "./data-table-columns";
import { Term } from "./term";

type ColumnHeadingProps<Row> = {
  column: TableColumn<Row>;
  sorted: false | "asc" | "desc";
  onSort?: () => void;
};

/** A heading that sorts when pressed, with its meaning beside it where the word needs one. */
export const ColumnHeading = <Row,>({ column, sorted, onSort }: ColumnHeadingProps<Row>) => (
  <th
    scope="col"
    aria-sort={sorted === "asc" ? "ascending" : sorted === "desc" ? "descending" : undefined}
    className={classNames(
      "h-10 border-b border-hairline px-3 text-sm first:pl-4 last:pr-4 sm:first:pl-5 sm:last:pr-5 font-medium whitespace-nowrap text-muted",
      columnClass(column),
    )}
  >
    <span className={classNames("flex items-center gap-1.5", column.align === "right" && "flex-row-reverse")}>
      {column.meaning ? <Term meaning={column.meaning}>{column.header}</Term> : !onSort && column.header}
      {onSort && (
        <button
          type="button"
          onClick={onSort}
          aria-label={column.meaning ? `Sort by ${column.header}` : undefined}
          className={classNames(
            "inline-flex items-center gap-1.5 rounded-xs hover:text-ink [&_svg]:size-3.5",
            column.align === "right" && "flex-row-reverse",
            sorted && "text-ink",
          )}
        >
          {!column.meaning && column.header}
          {sorted === "asc" && <ArrowUp aria-hidden="true" />}
          {sorted === "desc" && <ArrowDown aria-hidden="true" />}
          {!sorted && <ArrowDown aria-hidden="true" className="opacity-0 group-hover:opacity-40" />}
        </button>
      )}
    </span>
  </th>
);
