import type { ReactNode } from "react";
import { Controller, type Control, type FieldPath, type FieldValues } from "react-hook-form";
import { NumberField } from "@/components/ui/number-field";
import { SelectField, type Choice } from "@/components/ui/select-field";
import { TextField } from "@/components/ui/text-field";

type Common<Values extends FieldValues> = {
  control: Control<Values>;
  name: FieldPath<Values>;
  label: string;
  hint?: ReactNode;
};

type TextProps = { optional?: boolean; choices?: readonly string[] };

/** A text; empty is nothing where it may be left out. */
export const FormText = <Values extends FieldValues>({ control, name, label, hint, optional, choices }: Common<Values> & TextProps) => (
  <Controller
    control={control}
    name={name}
    render={({ field: { value, onChange, onBlur, ref }, fieldState: { error } }) => (
      <>
        <TextField
          ref={ref} label={label} hint={hint} error={error?.message} autoComplete="off"
          list={choices && `${name}-choices`} value={value ?? ""} onBlur={onBlur}
          onChange={({ target }) => onChange(optional && target.value.trim() === "" ? null : target.value)}
        />
        {choices && (
          <datalist id={`${name}-choices`}>
            {choices.map((choice) => (
              <option key={choice} value={choice} />
            ))}
          </datalist>
        )}
      </>
    )}
  />
);

/** A day of the calendar, or none. */
export const FormDay = <Values extends FieldValues>({ control, name, label, hint }: Common<Values>) => (
  <Controller
    control={control}
    name={name}
    render={({ field: { value, onChange, onBlur, ref }, fieldState: { error } }) => (
      <TextField
        ref={ref} type="date" label={label} hint={hint} error={error?.message}
        value={value ?? ""} onBlur={onBlur} onChange={({ target }) => onChange(target.value === "" ? null : target.value)}
      />
    )}
  />
);

type NumberProps = { unit?: number; step?: number; suffix?: string; empty?: null | 0 };

/** A number shown in a unit of its own: a share of 0.21 as 21 %. Left empty it is `empty`. */
export const FormNumber = <Values extends FieldValues>({ control, name, label, hint, unit = 1, step = 0.01, suffix = "", empty = null }: Common<Values> & NumberProps) => (
  <Controller
    control={control}
    name={name}
    render={({ field: { value, onChange, ref }, fieldState: { error } }) => (
      <NumberField
        ref={ref} label={label} hint={hint} error={error?.message} step={step}
        value={typeof value === "number" ? Number((value / unit).toFixed(6)) : null}
        format={(shown) => `${shown}${suffix}`}
        onChange={(shown) => onChange(shown === null ? empty : Number((shown * unit).toFixed(6)))}
      />
    )}
  />
);

/** One of a few; the empty one is nothing. */
export const FormSelect = <Values extends FieldValues>({ control, name, label, hint, choices }: Common<Values> & { choices: readonly Choice[] }) => (
  <Controller
    control={control}
    name={name}
    render={({ field: { value, onChange, onBlur, ref }, fieldState: { error } }) => (
      <SelectField
        ref={ref} label={label} hint={hint} error={error?.message} choices={choices}
        value={value ?? ""} onBlur={onBlur} onChange={(text) => onChange(text === "" ? null : text)}
      />
    )}
  />
);
