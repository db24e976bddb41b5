import { useQuery } from "@tanstack/react-query";
import type { QueryClient } from "@tanstack/react-query";
import { useParams, useSearchParams } from "react-router-dom";
import type { LoaderFunctionArgs } from "react-router-dom";
import { PageHeader } from "@/components/ui/page-header";
import { QueryView } from "@/components/ui/query-view";
import { Tag } from "@/components/ui/tag";
import { TextLink } from "@/components/ui/text-link";
import { extractQuery } from "@/features/extracts/api/extract";
import { ChangesPreview } from "@/features/extracts/components/changes-preview";
import { ExtractActions } from "@/features/extracts/components/extract-actions";
import { ExtractFacts } from "@/features/extracts/components/extract-facts";
import { ExtractWork } from "@/features/extracts/components/extract-work";
import { IssueList } from "@/features/extracts/components/issue-list";
import { describeState, kindNames } from "@/features/extracts/view/extract-state";
import { formatBytes } from "@/lib/format/bytes";
import { useChainFormat } from "@/lib/format/chain-format";
import { paths } from "@/lib/paths";

export const loaderFor =
  (queryClient: QueryClient) =>
  async ({ params }: LoaderFunctionArgs) => {
    await queryClient.ensureQueryData(extractQuery(params.extractId ?? ""));
    return null;
  };

export const ExtractRoute = () => {
  const { extractId = "" } = useParams();
  const [search, setSearch] = useSearchParams();
  const format = useChainFormat();
  const query = useQuery(extractQuery(extractId));
  const chooseRule = (rule: string | null) =>
    setSearch(rule ? { rule } : {}, { replace: true, preventScrollReset: true });
  return (
    <QueryView query={query} loading="Reading the extract" failure="The extract could not be read">
      {(extract) => {
        const { word, tone } = describeState(extract);
        const hasIssues = extract.rows !== null && extract.rows.errors + extract.rows.warnings > 0;
        return (
          <>
            <p className="mb-1 text-sm">
              <TextLink to={paths.extracts.href()}>Extracts</TextLink>
            </p>
            <PageHeader
              title={extract.fileName}
              heading={
                <span className="flex flex-wrap items-center gap-3">
                  <span className="break-all">{extract.fileName}</span>
                  <Tag tone={tone}>{word}</Tag>
                </span>
              }
              facts={[
                kindNames[extract.kind],
                formatBytes(extract.sizeBytes),
                `uploaded ${format.moment(extract.uploadedAt)} by ${extract.uploadedBy.name}`,
                extract.loadedAt && `loaded ${format.moment(extract.loadedAt)}`,
                extract.withdrawnAt && `withdrawn ${format.moment(extract.withdrawnAt)}`,
              ].filter(Boolean)}
              actions={<ExtractActions extract={extract} />}
            />
            <div className="flex flex-col gap-5">
              <ExtractWork extract={extract} />
              <ExtractFacts extract={extract} />
              {extract.rows !== null && extract.rows.usable > 0 && ["checked", "loaded"].includes(extract.state) && (
                <ChangesPreview extractId={extract.id} isLoaded={extract.state === "loaded"} />
              )}
              {hasIssues && <IssueList extract={extract} rule={search.get("rule")} onRule={chooseRule} />}
            </div>
          </>
        );
      }}
    </QueryView>
  );
};
