import { useState } from "react";
import type { ComponentProps, ReactNode } from "react";
import { parseNumber } from "@/lib/format/parse-number";
import { TextField } from "./text-field";

type NumberFieldProps = Omit<ComponentProps<"input">, "value" | "onChange" | "type" | "min" | "max" | "id"> & {
  label: ReactNode;
  hideLabel?: boolean;
  hint?: ReactNode;
  error?: string;
  value: number | null;
  /** Called when a number has been finished: on leaving the field, on Enter and on arrow keys. */
  onChange: (value: number | null) => void;
  min?: number;
  max?: number;
  step?: number;
  /** How the number is written while nobody types. */
  format?: (value: number) => string;
  fieldClassName?: string;
};

const withinRange = (value: number, { min, max }: { min?: number; max?: number }) =>
  Math.min(max ?? Infinity, Math.max(min ?? -Infinity, value));

/** A number typed as people type it (decimal comma or point, spaces, signs), kept within its range. */
export const NumberField = ({ value, onChange, min, max, step = 1, format = String, ...rest }: NumberFieldProps) => {
  const [draft, setDraft] = useState<string | null>(null);
  const finish = (text: string) => {
    setDraft(null);
    if (text.trim() === "") return onChange(null);
    const parsed = parseNumber(text);
    if (parsed !== null) onChange(withinRange(parsed, { min, max }));
  };
  const nudge = (steps: number) => {
    setDraft(null);
    onChange(withinRange(Number(((value ?? 0) + steps * step).toFixed(10)), { min, max }));
  };
  return (
    <TextField
      {...rest}
      inputMode="decimal"
      autoComplete="off"
      value={draft ?? (value === null ? "" : format(value))}
      onChange={(event) => setDraft(event.target.value)}
      onBlur={() => draft !== null && finish(draft)}
      onKeyDown={(event) => {
        if (event.key === "Enter" && draft !== null) finish(draft);
        if (event.key === "Escape") setDraft(null);
        if (event.key === "ArrowUp" || event.key === "ArrowDown") {
          event.preventDefault();
          nudge(event.key === "ArrowUp" ? 1 : -1);
        }
      }}
    />
  );
};
