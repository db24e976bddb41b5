import type { ComponentProps } from "react";
import { buttonStyle } from "./button-style";
import type { ButtonSize, ButtonTone } from "./button-style";
import { Spinner } from "./spinner";

type ButtonProps = ComponentProps<"button"> & {
  tone?: ButtonTone;
  size?: ButtonSize;
  /** Work is under way: the button says so and cannot be pressed again, but keeps its focus. */
  busy?: boolean;
};

export const Button = ({
  tone,
  size,
  busy = false,
  className,
  children,
  onClick,
  type = "button",
  ...rest
}: ButtonProps) => (
  <button
    {...rest}
    type={type}
    className={buttonStyle({ tone, size, className })}
    aria-disabled={busy || undefined}
    aria-busy={busy || undefined}
    onClick={busy ? (event) => event.preventDefault() : onClick}
  >
    {busy && <Spinner />}
    {children}
  </button>
);
