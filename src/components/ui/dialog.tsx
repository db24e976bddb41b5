import { X } from "lucide-react";
import { useEffect, useId, useRef } from "react";
import type { ReactNode } from "react";
import { IconButton } from "./icon-button";

type DialogProps = {
  open: boolean;
  onClose: () => void;
  title: string;
  children: ReactNode;
  /** Buttons at the foot, the chief one last. */
  actions?: ReactNode;
};

/**
 * The browser's own modal dialog: it keeps focus inside, closes on Escape and gives focus back. (The usual
 * library adds a style element to lock scrolling, which our content security policy refuses.)
 */
export const Dialog = ({ open, onClose, title, children, actions }: DialogProps) => {
  const element = useRef<HTMLDialogElement>(null);
  const titleId = useId();
  useEffect(() => {
    const dialog = element.current;
    if (!dialog || dialog.open === open) return;
    if (open) dialog.showModal();
    else dialog.close();
  }, [open]);
  return (
    <dialog
      ref={element}
      aria-labelledby={titleId}
      onClose={onClose}
      onClick={(event) => event.target === element.current && onClose()}
      className="m-auto w-[min(34rem,calc(100vw-2rem))] rounded-lg border border-hairline bg-raised p-0 text-ink shadow-raised backdrop:bg-black/40"
    >
      {open && (
        <div className="p-5">
          <div className="mb-3 flex items-start justify-between gap-4">
            <h2 id={titleId} className="text-lg font-semibold">
              {title}
            </h2>
            <IconButton label="Close" onClick={onClose} className="-mt-1 -mr-2">
              <X />
            </IconButton>
          </div>
          {children}
          {actions && <div className="mt-5 flex flex-wrap justify-end gap-3">{actions}</div>}
        </div>
      )}
    </dialog>
  );
};
