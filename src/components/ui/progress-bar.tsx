import { formatNumber } from "@/lib/format/number";
import { formatDuration } from "@/lib/format/date";
import { thinSpace } from "@/lib/format/glyphs";

type ProgressBarProps = {
  label: string;
  done: number;
  /** Null while it is not known how much there is. */
  total: number | null;
  /** What is counted: "rows", "stores". */
  counted?: string;
  secondsLeft?: number | null;
  /** Writes an amount; whole numbers by default. */
  format?: (amount: number) => string;
};

/** Work that takes a while: how much is done, of how much, and the time left. */
export const ProgressBar = (props: ProgressBarProps) => {
  const { label, done, total, counted, secondsLeft, format = formatNumber } = props;
  const share = total ? Math.min(1, done / total) : null;
  const counts = total === null ? format(done) : `${format(done)} of ${format(total)}`;
  return (
    <div>
      <div className="mb-1.5 flex items-baseline justify-between gap-3">
        <span className="font-medium">{label}</span>
        {share !== null && (
          <span className="text-sm text-muted">
            {Math.floor(share * 100)}
            {thinSpace}%
          </span>
        )}
      </div>
      <div
        role="progressbar"
        aria-label={label}
        aria-valuemin={0}
        aria-valuemax={100}
        aria-valuenow={share === null ? undefined : Math.floor(share * 100)}
        aria-valuetext={`${counts} ${counted ?? ""}`.trim()}
        className="h-1.5 overflow-hidden rounded-full bg-grid"
      >
        <div
          className={share === null ? "h-full w-1/3 animate-pulse rounded-full bg-accent" : "h-full rounded-full bg-accent"}
          style={share === null ? undefined : { width: `${share * 100}%` }}
        />
      </div>
      <p className="mt-1.5 text-sm text-muted">
        {counts} {counted}
        {typeof secondsLeft === "number" && ` · ${formatDuration(secondsLeft)} left`}
      </p>
    </div>
  );
};
