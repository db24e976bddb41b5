import type { ComponentProps } from "react";
import { classNames } from "@/lib/class-names";
import { Hint } from "./hint";

type IconButtonProps = Omit<ComponentProps<"button">, "aria-label"> & {
  /** Its name, read aloud and shown on hover and focus. */
  label: string;
};

export const IconButton = ({ label, className, type = "button", ...rest }: IconButtonProps) => (
  <Hint text={label}>
    <button
      {...rest}
      type={type}
      aria-label={label}
      className={classNames(
        "inline-flex size-8 shrink-0 items-center justify-center rounded-sm text-muted transition-colors",
        "hover:bg-hover hover:text-ink aria-pressed:bg-accent-soft aria-pressed:text-accent print:hidden [&_svg]:size-4",
        className,
      )}
    />
  </Hint>
);
