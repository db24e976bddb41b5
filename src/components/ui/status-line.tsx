import { Check, TriangleAlert, X } from "lucide-react";
import { createContext, useCallback, useContext, useMemo, useRef, useState } from "react";
import type { ReactNode } from "react";
import { IconButton } from "./icon-button";

const lineStyle =
  "pointer-events-auto flex max-w-xl items-center gap-2.5 rounded-md bg-ink py-1.5 pr-1.5 pl-4 " +
  "text-sheet shadow-raised [&_svg]:size-4";

type Status = { text: string; tone: "good" | "danger" };
type Say = { done: (text: string) => void; failed: (text: string) => void };

const StatusContext = createContext<Say>({ done: () => undefined, failed: () => undefined });

/** Tells, at the foot of the page, how something a person just did went. Views call it; the transport never does. */
export const useStatusLine = (): Say => useContext(StatusContext);

/** Good news leaves by itself; bad news stays until it is read. */
const goodNewsStaysMs = 5000;

export const StatusLineProvider = ({ children }: { children: ReactNode }) => {
  const [status, setStatus] = useState<Status | null>(null);
  const timer = useRef<ReturnType<typeof setTimeout>>(undefined);
  const say = useCallback((next: Status) => {
    clearTimeout(timer.current);
    setStatus(next);
    if (next.tone === "good") timer.current = setTimeout(() => setStatus(null), goodNewsStaysMs);
  }, []);
  const value = useMemo<Say>(
    () => ({
      done: (text) => say({ text, tone: "good" }),
      failed: (text) => say({ text, tone: "danger" }),
    }),
    [say],
  );
  return (
    <StatusContext.Provider value={value}>
      {children}
      <div role="status" className="pointer-events-none fixed inset-x-4 bottom-5 z-50 flex justify-center print:hidden">
        {status && (
          <div className={lineStyle}>
            {status.tone === "good" ? <Check aria-hidden="true" /> : <TriangleAlert aria-hidden="true" />}
            <span>{status.text}</span>
            <IconButton
              label="Dismiss"
              onClick={() => setStatus(null)}
              className="text-sheet hover:bg-sheet/15 hover:text-sheet"
            >
              <X />
            </IconButton>
          </div>
        )}
      </div>
    </StatusContext.Provider>
  );
};
