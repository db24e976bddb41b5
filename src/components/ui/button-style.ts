import { classNames } from "@/lib/class-names";

export type ButtonTone = "primary" | "secondary" | "quiet" | "danger";
export type ButtonSize = "medium" | "small";

const tones: Record<ButtonTone, string> = {
  primary: "border-transparent bg-accent text-on-accent hover:bg-accent-strong",
  secondary: "border-control bg-sheet text-ink hover:bg-hover",
  quiet: "border-transparent bg-transparent text-accent hover:bg-accent-soft",
  danger: "border-danger bg-sheet text-danger hover:bg-danger-soft",
};

const sizes: Record<ButtonSize, string> = {
  medium: "h-9 gap-2 px-3.5 text-base",
  small: "h-7 gap-1.5 px-2.5 text-sm",
};

/** Links that act as buttons look like buttons, so both take their looks from here. */
export const buttonStyle = (options: { tone?: ButtonTone; size?: ButtonSize; className?: string } = {}): string =>
  classNames(
    "inline-flex shrink-0 items-center justify-center rounded-sm border font-medium whitespace-nowrap transition-colors select-none",
    "disabled:opacity-55 aria-disabled:opacity-55 print:hidden [&_svg]:size-4 [&_svg]:shrink-0",
    tones[options.tone ?? "secondary"],
    sizes[options.size ?? "medium"],
    options.className,
  );
