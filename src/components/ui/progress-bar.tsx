import { formatDuration } from "@/lib/format/date";
import { formatPercent } from "@/lib/format/percent";

type ProgressBarProps = {
  label: string;
  /** 0 to 1; null while it is not known how much there is. */
  share: number | null;
  /** Counts, in words: "12,400 of 106,139 rows". */
  note?: string;
  secondsLeft?: number | null;
};

/** Work that takes a while: how much is done, of how much, and the time left. */
export const ProgressBar = ({ label, share, note, secondsLeft = null }: ProgressBarProps) => {
  const percent = share === null ? undefined : Math.floor(Math.min(1, Math.max(0, share)) * 100);
  return (
    <div>
      <div className="mb-1.5 flex items-baseline justify-between gap-3">
        <span className="font-medium">{label}</span>
        {percent !== undefined && <span className="text-sm text-muted">{formatPercent(percent / 100)}</span>}
      </div>
      <div
        role="progressbar"
        aria-label={label}
        aria-valuemin={0}
        aria-valuemax={100}
        aria-valuenow={percent}
        aria-valuetext={note}
        className="h-1.5 overflow-hidden rounded-full bg-grid"
      >
        <div
          className={
            percent === undefined
              ? "h-full w-1/3 animate-pulse rounded-full bg-accent"
              : "h-full rounded-full bg-accent"
          }
          style={percent === undefined ? undefined : { width: `${percent}%` }}
        />
      </div>
      <p className="mt-1.5 text-sm text-muted">
        {note}
        {secondsLeft !== null && ` · ${formatDuration(secondsLeft)} left`}
      </p>
    </div>
  );
};
