import { Link } from "react-router-dom";
import type { LinkProps } from "react-router-dom";
import { buttonStyle } from "./button-style";
import type { ButtonSize, ButtonTone } from "./button-style";

type LinkButtonProps = LinkProps & { tone?: ButtonTone; size?: ButtonSize };

/** Goes to another page and looks like a button. */
export const LinkButton = ({ tone, size, className, ...rest }: LinkButtonProps) => (
  <Link {...rest} className={buttonStyle({ tone, size, className })} />
);
