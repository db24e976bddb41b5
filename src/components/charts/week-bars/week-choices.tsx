import { useId } from "react";
import type { WeekBar } from "./week-layout";

const choiceStyle =
  "absolute top-0 cursor-pointer rounded-sm transition-colors hover:bg-hover " +
  "has-focus-visible:outline-2 has-focus-visible:outline-accent";

type WeekChoicesProps = {
  bars: readonly WeekBar[];
  selected: string | null;
  onSelect: (week: string) => void;
  height: number;
};

/** Picks the plan week looked at: radio buttons as large as the bars over which they lie. */
export const WeekChoices = ({ bars, selected, onSelect, height }: WeekChoicesProps) => {
  const name = useId();
  return (
    <div role="radiogroup" aria-label="Week looked at">
      {bars.map((bar) => (
        <label key={bar.week} className={choiceStyle} style={{ left: bar.left - 4, width: bar.width + 8, height }}>
          <input
            type="radio"
            name={name}
            className="sr-only"
            aria-label={bar.label}
            checked={bar.week === selected}
            onChange={() => onSelect(bar.week)}
          />
        </label>
      ))}
    </div>
  );
};
