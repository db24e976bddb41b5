import { Popover as RadixPopover } from "radix-ui";
import type { ReactNode } from "react";

type PopoverProps = { trigger: ReactNode; label: string; children: ReactNode; align?: "start" | "center" | "end" };

/** Something more about its button, beside it; the page behind stays usable. */
export const Popover = ({ trigger, label, children, align = "start" }: PopoverProps) => (
  <RadixPopover.Root>
    <RadixPopover.Trigger asChild>{trigger}</RadixPopover.Trigger>
    <RadixPopover.Portal>
      <RadixPopover.Content
        aria-label={label}
        align={align}
        sideOffset={6}
        collisionPadding={8}
        className="z-40 w-80 max-w-[calc(100vw-2rem)] rounded-md border border-hairline bg-raised p-4 text-ink shadow-raised"
      >
        {children}
      </RadixPopover.Content>
    </RadixPopover.Portal>
  </RadixPopover.Root>
);
