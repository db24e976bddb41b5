import type { ReactNode } from "react";
import { Sheet } from "@/components/ui/sheet";

type SettingsGroupProps = { heading: string; intro: string; children: ReactNode };

/** Settings that belong together, side by side where there is room. */
export const SettingsGroup = ({ heading, intro, children }: SettingsGroupProps) => (
  <Sheet heading={heading}>
    <p className="-mt-2 mb-4 text-muted">{intro}</p>
    <div className="grid items-start gap-x-6 gap-y-5 sm:grid-cols-2">{children}</div>
  </Sheet>
);
