import type { ReactNode } from "react";
import { classNames } from "@/lib/class-names";

export type TagTone = "neutral" | "accent" | "good" | "caution" | "danger";

const tones: Record<TagTone, string> = {
  neutral: "border-hairline text-muted",
  accent: "border-transparent bg-accent-soft text-accent",
  good: "border-transparent bg-good-soft text-good",
  caution: "border-caution-edge bg-caution-soft text-caution",
  danger: "border-transparent bg-danger-soft text-danger",
};

/** A state in a word. */
export const Tag = ({ tone = "neutral", children }: { tone?: TagTone; children: ReactNode }) => (
  <span
    className={classNames(
      "inline-flex h-6 items-center gap-1 rounded-sm border px-2 text-xs font-medium whitespace-nowrap",
      tones[tone],
    )}
  >
    {children}
  </span>
);
