import { X } from "lucide-react";
import { useEffect, useId, useRef } from "react";
import type { ReactNode } from "react";

const dialogStyle =
  "m-auto w-[min(34rem,calc(100vw-2rem))] rounded-lg border border-hairline bg-raised p-0 text-ink " +
  "shadow-raised backdrop:bg-[rgb(10_20_22/0.42)]";

const closeStyle =
  "absolute top-3.5 right-3 inline-flex size-8 items-center justify-center rounded-sm text-muted " +
  "hover:bg-hover hover:text-ink";

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
 * library adds a style element to lock scrolling, which our content security policy refuses.) It lies above
 * everything, also above popovers: keep comboboxes, terms and hints out of it.
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
      className={dialogStyle}
    >
      {open && (
        <div className="relative p-5">
          <h2 id={titleId} className="mb-3 pr-8 text-lg font-semibold">
            {title}
          </h2>
          {children}
          {actions && <div className="mt-5 flex flex-wrap justify-end gap-3">{actions}</div>}
          {/* Last, so that the dialog opens on what it asks. No hint: its own Escape would come before the dialog's. */}
          <button type="button" aria-label="Close" onClick={onClose} className={closeStyle}>
            <X className="size-4" aria-hidden="true" />
          </button>
        </div>
      )}
    </dialog>
  );
};
