import { ChevronDown } from "lucide-react";
import type { ComponentProps, ReactNode } from "react";
import { classNames } from "@/lib/class-names";
import { controlStyle } from "./control-style";
import { Field } from "./field";

export type Choice<Value extends string = string> = { value: Value; label: string; disabled?: boolean };

type SelectFieldProps<Value extends string> = Omit<ComponentProps<"select">, "id" | "value" | "onChange"> & {
  label: ReactNode;
  hideLabel?: boolean;
  hint?: ReactNode;
  error?: string;
  choices: readonly Choice<Value>[];
  value: Value;
  onChange: (value: Value) => void;
  fieldClassName?: string;
};

/** One of a few: the browser's own list, which works by keyboard and on phones. For long lists use `Combobox`. */
export const SelectField = <Value extends string>(props: SelectFieldProps<Value>) => {
  const { label, hideLabel, hint, error, choices, value, onChange, fieldClassName, className, ...rest } = props;
  const choose = (text: string) => {
    const chosen = choices.find((choice) => choice.value === text);
    if (chosen) onChange(chosen.value);
  };
  return (
    <Field label={label} hideLabel={hideLabel} hint={hint} error={error} className={fieldClassName}>
      {(wiring) => (
        <div className="relative">
          <select
            {...rest}
            {...wiring}
            value={value}
            onChange={(event) => choose(event.target.value)}
            className={classNames(controlStyle, "appearance-none pr-9", className)}
          >
            {choices.map((choice) => (
              <option key={choice.value} value={choice.value} disabled={choice.disabled}>
                {choice.label}
              </option>
            ))}
          </select>
          <ChevronDown className="pointer-events-none absolute top-2.5 right-3 size-4 text-muted" aria-hidden="true" />
        </div>
      )}
    </Field>
  );
};
