import type { ReactNode } from "react";
import type { Extract } from "@shared/contract/extracts";
import { Notice } from "@/components/ui/notice";
import type { IssueFilter } from "../../view/issue-filter";
import { needsLayout } from "../../view/extract-state";
import { IssueList } from "../issues/issue-list";
import { UnknownCodes } from "../unknown/unknown-codes";
import { CheckAgain } from "./check-again";

type WrongStepProps = { extract: Extract; filter: IssueFilter; onFilter: (filter: IssueFilter) => void };

/** What the check found: why the file cannot be used, or what is wrong with its rows and what can be done. */
export const WrongStep = ({ extract, filter, onFilter }: WrongStepProps) => {
  const { state, rows, failure, layout } = extract;
  if (failure && !needsLayout(extract) && (state === "unusable" || state === "received")) {
    const isReadWrongly = state === "unusable" && rows !== null && layout?.isConfirmed === false;
    const said = isReadWrongly ? "Read so, no row can be used. " : "This file cannot be used. ";
    const hasList = state === "unusable" && rows !== null && rows.errors > 0;
    return (
      <>
        <Padded>
          <Notice tone={isReadWrongly ? "caution" : "danger"} role="alert">
            <strong className="font-semibold">{state === "unusable" ? said : "The check broke down; nothing was changed. "}</strong>
            {failure.detail}
          </Notice>
          {!hasList && (
            <div className="mt-4">
              <CheckAgain extract={extract} />
            </div>
          )}
        </Padded>
        {hasList && <IssueList extract={extract} filter={filter} onFilter={onFilter} actions={<CheckAgain extract={extract} />} />}
      </>
    );
  }
  if (!rows) return <Padded>Every row is checked before anything is loaded.</Padded>;
  if (rows.errors + rows.warnings === 0) {
    return (
      <Padded>
        <div className="flex flex-wrap items-center justify-between gap-3">
          <p>Every row can be used, and none looks odd.</p>
          <CheckAgain extract={extract} />
        </div>
      </Padded>
    );
  }
  return (
    <>
      {state === "checked" && <UnknownCodes key={extract.checkedAt} extract={extract} />}
      <IssueList extract={extract} filter={filter} onFilter={onFilter} actions={<CheckAgain extract={extract} />} />
    </>
  );
};

const Padded = ({ children }: { children: ReactNode }) => <div className="p-4 text-muted sm:p-5">{children}</div>;
