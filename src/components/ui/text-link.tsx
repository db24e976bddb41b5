import { Link } from "react-router-dom";
import type { LinkProps } from "react-router-dom";
import { classNames } from "@/lib/class-names";

/** A link in running text or a table. */
export const TextLink = ({ className, ...rest }: LinkProps) => (
  <Link
    {...rest}
    className={classNames(
      "rounded-xs font-medium text-accent underline decoration-accent/30 underline-offset-3 hover:decoration-accent",
      className,
    )}
  />
);
