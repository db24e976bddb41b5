import { Controller, type Control, type FieldPath } from "react-hook-form";
import type { ReactNode } from "react";
import type { Chain } from "@shared/contract/chain";
import { Combobox } from "@/components/ui/combobox";
import type { ComboboxOption } from "@/components/ui/combobox-options";
import { NumberField } from "@/components/ui/number-field";
import { SelectField, type Choice } from "@/components/ui/select-field";

type Common = { control: Control<Chain>; name: FieldPath<Chain>; label: string; hint?: ReactNode };

type ChoiceSettingProps = Common & { choices: readonly Choice[]; onChosen?: (value: string) => void };

/** A setting that is one of few. Numbers are chosen by their text. */
export const ChoiceSetting = ({ control, name, label, hint, choices, onChosen }: ChoiceSettingProps) => (
  <Controller
    control={control}
    name={name}
    render={({ field: { value, onChange, onBlur, ref }, fieldState: { error } }) => (
      <SelectField
        ref={ref}
        label={label}
        hint={hint}
        error={error?.message}
        choices={choices}
        value={String(value)}
        onBlur={onBlur}
        onChange={(text) => {
          onChange(typeof value === "number" ? Number(text) : text);
          onChosen?.(text);
        }}
      />
    )}
  />
);

/** A setting that is one of many, found by typing. */
export const SearchedSetting = ({ control, name, label, hint, options }: Common & { options: readonly ComboboxOption[] }) => (
  <Controller
    control={control}
    name={name}
    render={({ field: { value, onChange }, fieldState: { error } }) => (
      <Combobox label={label} hint={hint} error={error?.message} options={options} value={String(value)} onChange={onChange} />
    )}
  />
);

type NumberSettingProps = Common & { unit: number; min: number; max: number; step: number; suffix: string };

/** A setting shown in a unit of its own: a share of 0.25 as 25 %, bytes as megabytes. */
export const NumberSetting = ({ control, name, label, hint, unit, min, max, step, suffix }: NumberSettingProps) => (
  <Controller
    control={control}
    name={name}
    render={({ field: { value, onChange, ref }, fieldState: { error } }) => (
      <NumberField
        ref={ref}
        label={label}
        hint={hint}
        error={error?.message}
        value={Number((Number(value) / unit).toFixed(6))}
        min={min}
        max={max}
        step={step}
        format={(shown) => `${shown} ${suffix}`}
        onChange={(shown) => shown !== null && onChange(unit > 1 ? Math.round(shown * unit) : Number((shown * unit).toFixed(6)))}
      />
    )}
  />
);
