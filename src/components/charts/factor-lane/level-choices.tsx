import { useId } from "react";
import { countOf } from "@/lib/format/number";
import type { LaneGeometry } from "../driver-lane/lane-geometry";
import { isLearnt } from "./factor-level";
import type { FactorLevel } from "./factor-level";

const choiceStyle =
  "absolute top-1.5 bottom-2 cursor-pointer rounded-md border border-transparent transition-colors " +
  "hover:bg-hover has-checked:border-driver has-checked:bg-driver-soft has-focus-visible:outline-2 " +
  "has-focus-visible:outline-offset-1 has-focus-visible:outline-accent " +
  "has-disabled:cursor-not-allowed has-disabled:opacity-60";

type LevelChoicesProps = {
  label: string;
  levels: readonly FactorLevel[];
  value: string | null;
  geometry: LaneGeometry;
  onChange: (value: string) => void;
  readOnly?: boolean;
};

/** The levels as a group of radio buttons, each as large as its column in the drawing above it. */
export const LevelChoices = ({ label, levels, value, geometry, onChange, readOnly = false }: LevelChoicesProps) => {
  const name = useId();
  const { margin, innerWidth } = geometry;
  const column = innerWidth / levels.length;
  const width = Math.min(112, column - 8);
  return (
    <div role="radiogroup" aria-label={label} className="absolute inset-0">
      {levels.map((level, index) => {
        const isClosed = !isLearnt(level) || (readOnly && level.value !== value);
        return (
          <label
            key={level.value}
            title={isLearnt(level) ? undefined : `Seen in ${countOf(level.weeks, "week")}: too few to learn from`}
            className={choiceStyle}
            style={{ left: margin.left + (index + 0.5) * column - width / 2, width }}
          >
            <input
              type="radio"
              name={name}
              className="sr-only"
              checked={level.value === value}
              disabled={isClosed}
              onChange={() => onChange(level.value)}
              aria-label={`${level.label}${isLearnt(level) ? "" : ", not learnt"}`}
            />
          </label>
        );
      })}
    </div>
  );
};
