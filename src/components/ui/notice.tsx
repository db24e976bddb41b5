import type { ReactNode } from "react";
import { classNames } from "@/lib/class-names";

type NoticeProps = { tone?: "caution" | "danger" | "good" | "neutral"; children: ReactNode; role?: "status" | "alert" };

const tones = {
  caution: "border-caution-edge bg-caution-soft text-caution",
  danger: "border-danger/30 bg-danger-soft text-danger",
  good: "border-good/30 bg-good-soft text-good",
  neutral: "border-hairline bg-hover text-ink",
};

/** Words that belong to what stands beside them: a caution, what was kept, what to do. */
export const Notice = ({ tone = "caution", children, role }: NoticeProps) => (
  <div role={role} className={classNames("rounded-md border px-3.5 py-3 text-sm", tones[tone])}>
    {children}
  </div>
);
