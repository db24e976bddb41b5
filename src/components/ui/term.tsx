import { Popover } from "radix-ui";
import { useState } from "react";
import type { ReactNode } from "react";

const bubbleStyle =
  "pointer-events-none z-50 max-w-72 rounded-sm bg-ink px-2.5 py-1.5 text-sm font-normal text-sheet " + "shadow-raised";

type TermProps = { children: ReactNode; /** One plain sentence: what the word means here. */ meaning: string };

/** A word of the trade with its one-line meaning on hover, focus and, on a touch screen, tap. */
export const Term = ({ children, meaning }: TermProps) => {
  const [open, setOpen] = useState(false);
  const [pinned, setPinned] = useState(false);
  const close = () => {
    setOpen(false);
    setPinned(false);
  };
  return (
    <Popover.Root open={open} onOpenChange={(next) => (next ? setOpen(true) : close())}>
      <Popover.Anchor asChild>
        <button
          type="button"
          className="cursor-help rounded-xs text-left underline decoration-muted/60 decoration-dotted underline-offset-3"
          aria-description={meaning}
          onPointerEnter={(event) => event.pointerType === "mouse" && setOpen(true)}
          onPointerLeave={(event) => event.pointerType === "mouse" && !pinned && setOpen(false)}
          onFocus={() => setOpen(true)}
          onBlur={close}
          onClick={() => {
            setOpen(true);
            setPinned(true);
          }}
          onKeyDown={(event) => event.key === "Escape" && close()}
        >
          {children}
        </button>
      </Popover.Anchor>
      <Popover.Portal>
        <Popover.Content
          side="top"
          sideOffset={6}
          collisionPadding={8}
          onOpenAutoFocus={(event) => event.preventDefault()}
          onCloseAutoFocus={(event) => event.preventDefault()}
          aria-hidden="true"
          className={bubbleStyle}
        >
          {meaning}
        </Popover.Content>
      </Popover.Portal>
    </Popover.Root>
  );
};
