import { Check, ChevronDown, CircleAlert, X } from "lucide-react";
import { useId } from "react";
import type { ReactNode } from "react";
import { Spinner } from "@/components/ui/spinner";
import { classNames } from "@/lib/class-names";
import type { PathStep as Step, StepMark } from "../../view/path-steps";

type PathStepProps = {
  step: Step;
  /** Its place on the path, from 1. */
  number: number;
  isLast: boolean;
  isOpen: boolean;
  onToggle: () => void;
  children: ReactNode;
};

const markStyles: Record<StepMark, string> = {
  done: "border-good bg-good-soft text-good",
  look: "border-caution bg-caution-soft text-caution",
  now: "border-accent bg-accent text-on-accent",
  working: "border-accent bg-sheet text-accent",
  stopped: "border-danger bg-danger-soft text-danger",
  waiting: "border-control bg-paper text-muted",
};

const lineStyles: Partial<Record<StepMark, string>> = { stopped: "text-danger", look: "text-caution", now: "text-accent font-medium" };

const Mark = ({ mark, number }: { mark: StepMark; number: number }) => (
  <span
    aria-hidden="true"
    className={classNames(
      "inline-flex size-7 shrink-0 items-center justify-center rounded-full border text-sm font-semibold [&_svg]:size-4",
      markStyles[mark],
    )}
  >
    {mark === "done" && <Check />}
    {mark === "look" && <CircleAlert />}
    {mark === "stopped" && <X />}
    {mark === "working" && <Spinner />}
    {(mark === "now" || mark === "waiting") && number}
  </span>
);

/** One station of a file's way: what it is, how it stands, and, opened, what belongs to it. */
export const PathStep = ({ step, number, isLast, isOpen, onToggle, children }: PathStepProps) => {
  const id = useId();
  const { name, title, mark, line } = step;
  return (
    <li className="relative flex gap-4 pb-3 last:pb-0" aria-current={mark === "now" || mark === "stopped" ? "step" : undefined}>
      <div className="relative max-sm:hidden">
        <div className="mt-3">
          <Mark mark={mark} number={number} />
        </div>
        {!isLast && (
          <span
            aria-hidden="true"
            className={classNames(
              "absolute top-[2.9rem] -bottom-2 left-[13.5px] border-l",
              mark === "done" || mark === "look" ? "border-good" : "border-dashed border-control",
            )}
          />
        )}
      </div>
      <section
        aria-labelledby={`${id}-title`}
        className={classNames(
          "min-w-0 flex-1 rounded-lg border border-hairline print:break-inside-avoid",
          mark === "waiting" && !isOpen ? "bg-transparent" : "bg-sheet",
        )}
      >
        <h2 id={`${id}-title`} className="text-base font-semibold">
          <button
            type="button"
            data-step={name}
            aria-expanded={isOpen}
            aria-controls={`${id}-body`}
            onClick={onToggle}
            className="flex min-h-13 w-full items-center gap-3 rounded-lg px-4 py-2 text-left hover:bg-hover focus-visible:-outline-offset-2 sm:px-5"
          >
            <span className="sm:hidden">
              <Mark mark={mark} number={number} />
            </span>
            <span className="min-w-0 flex-1 sm:flex sm:items-baseline sm:gap-4">
              <span className="block sm:w-44 sm:shrink-0">{title}</span>
              <span className={classNames("block min-w-0 text-base font-normal text-muted", lineStyles[mark])}>{line}</span>
            </span>
            <ChevronDown aria-hidden="true" className={classNames("size-4 shrink-0 text-muted transition-transform", isOpen && "rotate-180")} />
          </button>
        </h2>
        <div id={`${id}-body`} hidden={!isOpen} className="border-t border-hairline">
          {isOpen && children}
        </div>
      </section>
    </li>
  );
};
