import type { ReactNode } from "react";
import type { Extract } from "@shared/contract/extracts";
import type { ExtractLayout } from "@shared/contract/saved-layouts";
import { promotionColumn } from "@shared/contract/layouts";
import { Notice } from "@/components/ui/notice";
import { columnLabel } from "../../view/column-labels";
import { fixedColumns } from "../../view/layout-mapping";
import { problemSentence } from "../../view/problem-sentence";
import { FileRows } from "./file-rows";
import { FixedValues } from "./fixed-values";
import { LayoutSettings } from "./layout-settings";
import { ReadRows } from "./read-rows";
import { UnknownWords } from "./unknown-words";
import { UseLayout } from "./use-layout";
import { useLayoutDraft } from "./use-layout-draft";
import { WordLists } from "./word-lists";

type LayoutEditorProps = { extract: Extract; start: ExtractLayout; onLeave?: () => void };

const withWords = [promotionColumn, "feature", "display", "mechanic", "sold_by_weight"];

/** From the file's rows as they stand to the rows as they will be read, with everything that lies between. */
export const LayoutEditor = ({ extract, start, onLeave }: LayoutEditorProps) => {
  const editing = useLayoutDraft(extract.id, start);
  const { draft, change, changePart, preview, isBehind, problems, error } = editing;
  return (
    <div className="flex flex-col gap-6 p-4 sm:p-5">
      <Part title="The file as it stands" note="Above each column: what of ours it becomes, and why we think so.">
        <Missing columns={preview.missing} />
        <FileRows layout={draft} preview={preview} onChange={change} />
      </Part>
      <Part title="The same rows as they will be read">
        <ReadRows preview={preview} isBehind={isBehind} />
        <UnknownWords layout={draft} preview={preview} onChange={(words) => changePart({ words })} />
      </Part>
      <Part title="How it is written">
        <LayoutSettings layout={draft} preview={preview} onWriting={editing.rewrite} onPart={changePart} />
      </Part>
      <More title="Values that are the same in every row" isOpen={fixedColumns(draft).length > 0}>
        <FixedValues layout={draft} onChange={change} />
      </More>
      {withWords.some((column) => column in draft.mapping) && (
        <More title="Words for promotions, and for yes and no">
          <WordLists layout={draft} onChange={(words) => changePart({ words })} />
        </More>
      )}
      {[...new Set(problems)].map((problem) => (
        <Notice key={problem} tone="danger" role="alert">
          {problem}
        </Notice>
      ))}
      {error !== null && (
        <Notice tone="danger" role="alert">
          {problemSentence(error)}
        </Notice>
      )}
      <UseLayout extract={extract} start={start} editing={editing} onLeave={onLeave} />
    </div>
  );
};

const Part = ({ title, note, children }: { title: string; note?: string; children: ReactNode }) => (
  <section>
    <h3 className="font-semibold">{title}</h3>
    {note && <p className="text-sm text-muted">{note}</p>}
    <div className="mt-3">{children}</div>
  </section>
);

/** Seldom needed, so folded away until it is. */
const More = ({ title, isOpen = false, children }: { title: string; isOpen?: boolean; children: ReactNode }) => (
  <details open={isOpen || undefined} className="rounded-md border border-hairline px-4 py-3">
    <summary className="w-fit rounded-xs font-medium text-accent">{title}</summary>
    <div className="mt-3">{children}</div>
  </details>
);

const Missing = ({ columns }: { columns: readonly string[] }) => {
  if (columns.length === 0) return null;
  const names = columns.map(columnLabel).join(", ");
  return (
    <div className="mb-3">
      <Notice tone="danger" role="alert">
        <strong className="font-semibold">Still needed: {names}.</strong> Choose above a column which of these it is
        {columns.length === 1 ? "" : ", one for each"}; or, where the file leaves it out, give one value for every row below.
      </Notice>
    </div>
  );
};
