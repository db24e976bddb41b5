import { Tooltip } from "radix-ui";
import type { ReactNode } from "react";

type HintProps = { text: ReactNode; children: ReactNode; side?: "top" | "bottom" | "left" | "right" };

/** A line of explanation on hover and focus. The child must be focusable. */
export const Hint = ({ text, children, side = "top" }: HintProps) => (
  <Tooltip.Provider delayDuration={250} skipDelayDuration={150}>
    <Tooltip.Root>
      <Tooltip.Trigger asChild>{children}</Tooltip.Trigger>
      <Tooltip.Portal>
        <Tooltip.Content
          side={side}
          sideOffset={6}
          collisionPadding={8}
          className="z-50 max-w-72 rounded-sm bg-ink px-2.5 py-1.5 text-sm text-sheet shadow-raised"
        >
          {text}
        </Tooltip.Content>
      </Tooltip.Portal>
    </Tooltip.Root>
  </Tooltip.Provider>
);
