import type { Extract } from "@shared/contract/extracts";
import { Sheet } from "@/components/ui/sheet";
import { useChainFormat } from "@/lib/format/chain-format";
import { countOf } from "@/lib/format/number";
import { classNames } from "@/lib/class-names";

type FigureProps = { label: string; value: string; tone?: "danger" | "caution"; note?: string };

const Figure = ({ label, value, tone, note }: FigureProps) => (
  <div className="min-w-0">
    <dt className="text-sm text-muted">{label}</dt>
    <dd
      className={classNames(
        "text-2xl font-semibold tracking-[-0.02em]",
        tone === "danger" && "text-danger",
        tone === "caution" && "text-caution",
      )}
    >
      {value}
    </dd>
    {note && <dd className="text-sm text-muted">{note}</dd>}
  </div>
);

/** What the check counted. */
export const ExtractFacts = ({ extract }: { extract: Extract }) => {
  const format = useChainFormat();
  const { rows, firstWeek, lastWeek } = extract;
  if (!rows) return null;
  const isWhole = rows.usable === rows.read;
  return (
    <Sheet>
      <dl className="grid grid-cols-2 gap-5 sm:grid-cols-4">
        <Figure
          label="Rows read"
          value={format.number(rows.read)}
          note={firstWeek && lastWeek ? format.weekSpan(firstWeek, lastWeek) : undefined}
        />
        <Figure
          label="Rows to use"
          value={format.number(rows.usable)}
          note={isWhole ? "all of them" : `${countOf(rows.read - rows.usable, "row")} left out`}
        />
        <Figure label="Errors" value={format.number(rows.errors)} tone={rows.errors > 0 ? "danger" : undefined} />
        <Figure
          label="Warnings"
          value={format.number(rows.warnings)}
          tone={rows.warnings > 0 ? "caution" : undefined}
        />
      </dl>
    </Sheet>
  );
};
