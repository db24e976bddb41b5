import { useInfiniteQuery } from "@tanstack/react-query";
import type { CatalogueChange, HistoryKind } from "@shared/contract/catalogue-history";
import { Button } from "@/components/ui/button";
import { ErrorState } from "@/components/ui/error-state";
import { LoadingState } from "@/components/ui/skeleton";
import { TextLink } from "@/components/ui/text-link";
import { useChainFormat } from "@/lib/format/chain-format";
import { paths } from "@/lib/paths";
import { historyQuery } from "../api/history";
import { changeDetails, changeSentence, manySentence } from "../view/change-words";
import { groupChanges } from "../view/group-changes";

type ChangeHistoryProps = { kind: HistoryKind; code?: string };

/** Who changed what, newest first. */
export const ChangeHistory = ({ kind, code }: ChangeHistoryProps) => {
  const query = useInfiniteQuery(historyQuery(kind, code));
  if (query.isPending) return <LoadingState label="Reading the history" />;
  if (query.isError) return <ErrorState title="The history could not be read" error={query.error} onRetry={() => void query.refetch()} />;
  const changes = query.data.pages.flatMap(({ items }) => items);
  if (changes.length === 0) return <p className="text-muted">No change is on record.</p>;
  return (
    <>
      <ol className="flex flex-col">
        {groupChanges(changes).map((group) => {
          const [change] = group;
          return group.length === 1
            ? <Change key={change.id} change={change} namesCode={code === undefined} />
            : <Together key={change.id} group={group} namesCode={code === undefined} />;
        })}
      </ol>
      {query.hasNextPage && (
        <Button size="small" className="mt-3" busy={query.isFetchingNextPage} onClick={() => void query.fetchNextPage()}>
          Show older changes
        </Button>
      )}
    </>
  );
};

type ChangeProps = { change: CatalogueChange; namesCode: boolean };

const entryStyle = "border-l-2 border-hairline py-1.5 pl-3.5";

const Change = ({ change, namesCode }: ChangeProps) => {
  const format = useChainFormat();
  const details = changeDetails(change, format);
  return (
    <li className={entryStyle}>
      <p>
        <Person change={change} /> {changeSentence(change, format)}
        {namesCode && <span className="text-muted"> ({change.code})</span>}
        <Origin change={change} />
      </p>
      {details.length > 0 && <p className="text-sm text-muted">{details.join(" · ")}</p>}
    </li>
  );
};

/** Many that came at once: how many, and each on demand. */
const Together = ({ group, namesCode }: { group: readonly CatalogueChange[]; namesCode: boolean }) => {
  const format = useChainFormat();
  const [change] = group;
  return (
    <li className={entryStyle}>
      <p>
        <Person change={change} /> {manySentence(change, group.length)}
        <Origin change={change} />
      </p>
      <details className="text-sm text-muted">
        <summary className="w-fit rounded-xs">Each of them</summary>
        <ul className="mt-1 list-disc pl-5">
          {group.map((each) => (
            <li key={each.id}>{[changeSentence(each, format) + (namesCode ? ` (${each.code})` : ""), ...changeDetails(each, format)].join(" · ")}</li>
          ))}
        </ul>
      </details>
    </li>
  );
};

const Person = ({ change }: { change: CatalogueChange }) => <span className="font-medium">{change.person?.name ?? "Shelftide"}</span>;

/** By which file or script, and when. */
const Origin = ({ change }: { change: CatalogueChange }) => {
  const format = useChainFormat();
  return (
    <>
      {change.file && (
        <>
          {" by the file "}
          <TextLink to={paths.extract.href(change.file.id)}>{change.file.name}</TextLink>
        </>
      )}
      {!change.file && change.byToken && " by a script"}
      <span className="text-muted"> · {format.moment(change.at)}</span>
    </>
  );
};

/** The history of everything of a kind, folded away below a list: also of what was removed. */
export const KindHistory = ({ kind }: { kind: HistoryKind }) => (
  <details className="mt-4 rounded-lg border border-hairline bg-sheet px-4 py-3 sm:px-5 print:hidden">
    <summary className="w-fit rounded-xs font-medium">Who changed what</summary>
    <div className="mt-3"><ChangeHistory kind={kind} /></div>
  </details>
);

/** The history folded away, below a form. */
export const FoldedHistory = (props: ChangeHistoryProps) => (
  <details className="mt-5 border-t border-hairline pt-3">
    <summary className="w-fit rounded-xs font-medium">Who changed what</summary>
    <div className="mt-2 max-h-64 overflow-y-auto" tabIndex={0} role="region" aria-label="History">
      <ChangeHistory {...props} />
    </div>
  </details>
);
