import { useState } from "react";
import { snap } from "../scale/snap";
import type { Steps } from "../scale/snap";

const fieldStyle =
  "-ml-2 h-8 w-[calc(100%+0.5rem)] max-w-40 rounded-sm border border-transparent bg-transparent " +
  "px-2 text-xl font-semibold tracking-[-0.01em] text-ink transition-colors hover:border-control " +
  "focus:border-control focus-visible:outline-offset-0";

type LaneValueProps = {
  /** Name of the field: "Price, typed". */
  label: string;
  value: number;
  text: string;
  isMixed: boolean;
  steps: Steps;
  /** Reads what a person types; null for what is no value. */
  parse?: (text: string) => number | null;
  format: (value: number) => string;
  hint?: string;
  onCommit: (value: number) => void;
};

/** The lane's value, large; where it can be typed it is a field that looks like text until it is needed. */
export const LaneValue = (props: LaneValueProps) => {
  const { label, value, text, isMixed, steps, parse, format, hint, onCommit } = props;
  const [draft, setDraft] = useState<string | null>(null);
  const [problem, setProblem] = useState<string | null>(null);
  const shown = isMixed ? "mixed" : text;
  if (!parse) return <p className="text-xl font-semibold tracking-[-0.01em] text-ink">{shown}</p>;
  const finish = () => {
    const parsed = draft === null ? null : parse(draft);
    if (draft !== null) setProblem(parsed === null ? "That is no value for it." : beyondEnds(parsed, { steps, format }));
    setDraft(null);
    if (parsed === null) return;
    const next = snap(parsed, steps);
    if (next !== value || isMixed) onCommit(next);
  };
  return (
    <>
      <input
        aria-label={label}
        aria-description={hint}
        title={hint}
        value={draft ?? shown}
        inputMode={hint ? "text" : "decimal"}
        autoComplete="off"
        spellCheck={false}
        onFocus={(event) => event.target.select()}
        onChange={(event) => {
          setProblem(null);
          setDraft(event.target.value);
        }}
        onBlur={finish}
        onKeyDown={(event) => {
          if (event.key === "Enter") finish();
          if (event.key === "Escape") setDraft(null);
        }}
        className={fieldStyle}
      />
      {problem && (
        <span role="alert" className="block text-sm text-caution">
          {problem}
        </span>
      )}
    </>
  );
};

type Ends = { steps: Steps; format: (value: number) => string };

const beyondEnds = (typed: number, { steps, format }: Ends): string | null => {
  if (typed < steps.min) return `The curve begins at ${format(steps.min)}.`;
  return typed > steps.max ? `The curve ends at ${format(steps.max)}.` : null;
};
