import { useEffect, useRef, useState } from "react";
import type { ReactNode } from "react";
import type { Extract } from "@shared/contract/extracts";
import { formatBytes } from "@/lib/format/bytes";
import { useChainFormat } from "@/lib/format/chain-format";
import type { IssueFilter } from "../../view/issue-filter";
import { kindNames } from "../../view/extract-state";
import { pathSteps } from "../../view/path-steps";
import type { StepName } from "../../view/path-steps";
import { ChangesStep } from "../changes/changes-step";
import { ReadingStep } from "../reading/reading-step";
import { ExtractWork } from "./extract-work";
import { FileStep } from "./file-step";
import { LoadedStep } from "./loaded-step";
import { PathStep } from "./path-step";
import { WrongStep } from "./wrong-step";

type ExtractPathProps = { extract: Extract; filter: IssueFilter; onFilter: (filter: IssueFilter) => void };

/** A file's way from its arrival to being loaded. The steps that ask for a person are open; any can be opened. */
export const ExtractPath = ({ extract, filter, onFilter }: ExtractPathProps) => {
  const format = useChainFormat();
  const list = useRef<HTMLOListElement>(null);
  // What a person opened or closed holds until the file has come further.
  const stage = `${extract.state} ${extract.layout?.isConfirmed ?? ""}`;
  const [toggled, setToggled] = useState<{ stage: string; steps: Partial<Record<StepName, boolean>> }>({ stage, steps: {} });
  const arrived = `${kindNames[extract.kind]}, ${formatBytes(extract.sizeBytes)}, arrived ${format.moment(extract.uploadedAt)}`;
  const steps = pathSteps(extract, arrived);
  const isOpen = (name: StepName, byItself: boolean) =>
    (toggled.stage === stage ? toggled.steps[name] : undefined) ?? (byItself || (name === "wrong" && filter.rule !== null));
  const reached = useRef(stage);
  useEffect(() => {
    if (reached.current === stage) return;
    reached.current = stage;
    // A button that was pressed is gone with its step: the focus goes on to the step that is next.
    if (document.activeElement === document.body) list.current?.querySelector<HTMLElement>("[aria-current] [data-step]")?.focus({ preventScroll: true });
  }, [stage]);
  const bodies: Record<StepName, ReactNode> = {
    file: <FileStep extract={extract} />,
    read: <ReadingStep extract={extract} />,
    wrong: <WrongStep extract={extract} filter={filter} onFilter={onFilter} />,
    changes: <ChangesStep extract={extract} />,
    loaded: <LoadedStep extract={extract} />,
  };
  return (
    <>
      <ExtractWork extract={extract} />
      <ol ref={list} aria-label="The way of this file">
        {steps.map((step, at) => {
          const shown = isOpen(step.name, step.isOpen);
          return (
            <PathStep
              key={step.name}
              step={step}
              number={at + 1}
              isLast={at === steps.length - 1}
              isOpen={shown}
              onToggle={() =>
                setToggled((before) => ({
                  stage,
                  steps: { ...(before.stage === stage ? before.steps : {}), [step.name]: !shown },
                }))
              }
            >
              {bodies[step.name]}
            </PathStep>
          );
        })}
      </ol>
    </>
  );
};
