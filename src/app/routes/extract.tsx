import { useQuery } from "@tanstack/react-query";
import type { QueryClient } from "@tanstack/react-query";
import { Download } from "lucide-react";
import { useParams, useSearchParams } from "react-router-dom";
import type { LoaderFunctionArgs } from "react-router-dom";
import { getExtractOriginal } from "@shared/contract/extracts";
import { buttonStyle } from "@/components/ui/button-style";
import { PageHeader } from "@/components/ui/page-header";
import { QueryView } from "@/components/ui/query-view";
import { Tag } from "@/components/ui/tag";
import { TextLink } from "@/components/ui/text-link";
import { extractQuery } from "@/features/extracts/api/extract";
import { ExtractPath } from "@/features/extracts/components/path/extract-path";
import { describeState, kindNames } from "@/features/extracts/view/extract-state";
import { readIssueFilter } from "@/features/extracts/view/issue-filter";
import type { IssueFilter } from "@/features/extracts/view/issue-filter";
import { endpointAddress } from "@/lib/api-client";
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
  const choose = ({ rule, severity }: IssueFilter) =>
    setSearch({ ...(rule && { rule }), ...(severity && { severity }) }, { replace: true, preventScrollReset: true });
  return (
    <QueryView query={query} loading="Reading the extract" failure="The extract could not be read">
      {(extract) => {
        const { word, tone } = describeState(extract);
        const { firstWeek, lastWeek } = extract;
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
                firstWeek && lastWeek && format.weekSpan(firstWeek, lastWeek),
                `uploaded ${format.moment(extract.uploadedAt)} by ${extract.uploadedBy.name}`,
              ].filter(Boolean)}
              actions={
                <a
                  href={endpointAddress(getExtractOriginal, { params: { id: extract.id } })}
                  download={extract.fileName}
                  className={buttonStyle()}
                >
                  <Download aria-hidden="true" /> Original
                </a>
              }
            />
            <ExtractPath key={extract.id} extract={extract} filter={readIssueFilter(search)} onFilter={choose} />
          </>
        );
      }}
    </QueryView>
  );
};
