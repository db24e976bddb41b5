import { useInfiniteQuery } from "@tanstack/react-query";
import type { CatalogueChange, HistoryKind } from "@shared/contract/catalogue-history";
import { Button } from "@/components/ui/button";
import { ErrorState } from "@/components/ui/error-state";
import { LoadingState } from "@/components/ui/skeleton";
import { TextLink } from "@/components/ui/text-link";
import { useChainFormat } from "@/lib/format/chain-format";
import { paths } from "@/lib/paths";
import { historyQuery } from "../api/history";
import { changeDetails, changeSentence } from "../view/change-words";

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
        {changes.map((change) => (
          <Change key={change.id} change={change} namesCode={code === undefined} />
        ))}
      </ol>
      {query.hasNextPage && (
        <Button size="small" className="mt-3" busy={query.isFetchingNextPage} onClick={() => void query.fetchNextPage()}>
          Show older changes
        </Button>
      )}
    </>
  );
};

const Change = ({ change, namesCode }: { change: CatalogueChange; namesCode: boolean }) => {
  const format = useChainFormat();
  const details = changeDetails(change, format);
  return (
    <li className="border-l-2 border-hairline py-1.5 pl-3.5">
      <p>
        <span className="font-medium">{change.person?.name ?? "Shelftide"}</span> {changeSentence(change, format)}
        {namesCode && <span className="text-muted"> ({change.code})</span>}
        {change.file && (
          <>
            {" by the file "}
            <TextLink to={paths.extract.href(change.file.id)}>{change.file.name}</TextLink>
          </>
        )}
        {!change.file && change.byToken && " by a script"}
        <span className="text-muted"> · {format.moment(change.at)}</span>
      </p>
      {details.length > 0 && <p className="text-sm text-muted">{details.join(" · ")}</p>}
    </li>
  );
};

/** The history folded away, below a form. */
export const FoldedHistory = (props: ChangeHistoryProps) => (
  <details className="mt-5 border-t border-hairline pt-3">
    <summary className="w-fit rounded-xs font-medium">Who changed what</summary>
    <div className="mt-2 max-h-64 overflow-y-auto" tabIndex={0} role="region" aria-label="History">
      <ChangeHistory {...props} />
    </div>
  </details>
);
