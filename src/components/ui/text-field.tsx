import type { ComponentProps, ReactNode } from "react";
import { classNames } from "@/lib/class-names";
import { controlStyle } from "./control-style";
import { Field } from "./field";

type TextFieldProps = Omit<ComponentProps<"input">, "id"> & {
  label: ReactNode;
  hideLabel?: boolean;
  hint?: ReactNode;
  error?: string;
  fieldClassName?: string;
};

export const TextField = ({ label, hideLabel, hint, error, fieldClassName, className, ...rest }: TextFieldProps) => (
  <Field label={label} hideLabel={hideLabel} hint={hint} error={error} className={fieldClassName}>
    {(wiring) => <input {...rest} {...wiring} className={classNames(controlStyle, className)} />}
  </Field>
);
