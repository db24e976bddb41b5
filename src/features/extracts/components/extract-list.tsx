import type { Extract } from "@shared/contract/extracts";
import { DataTable } from "@/components/ui/data-table";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { Tag } from "@/components/ui/tag";
import { TextLink } from "@/components/ui/text-link";
import { useChainFormat } from "@/lib/format/chain-format";
import type { ChainFormat } from "@/lib/format/chain-format";
import { paths } from "@/lib/paths";
import { describeState, kindNames } from "../view/extract-state";

const stateOf = (extract: Extract) => {
  const { word, tone } = describeState(extract);
  return <Tag tone={tone}>{word}</Tag>;
};

const columnsFor = (format: ChainFormat): TableColumn<Extract>[] => [
  {
    id: "file",
    header: "File",
    value: (extract) => extract.fileName,
    cell: (extract) => <TextLink to={paths.extract.href(extract.id)}>{extract.fileName}</TextLink>,
  },
  { id: "kind", header: "Holds", value: (extract) => kindNames[extract.kind], width: "8rem", from: "sm" },
  {
    id: "weeks",
    header: "Weeks",
    value: (extract) => extract.firstWeek,
    cell: ({ firstWeek, lastWeek }) => (firstWeek && lastWeek ? format.weekSpan(firstWeek, lastWeek) : "–"),
    from: "lg",
  },
  {
    id: "rows",
    header: "Rows",
    value: (extract) => extract.rows?.read ?? null,
    cell: (extract) => format.number(extract.rows?.read),
    align: "right",
    width: "7rem",
    from: "sm",
  },
  {
    id: "errors",
    header: "Errors",
    meaning: "Rows that cannot be used as they are; the others still can.",
    value: (extract) => extract.rows?.errors ?? null,
    cell: (extract) => format.number(extract.rows?.errors),
    align: "right",
    width: "6.5rem",
    from: "sm",
  },
  { id: "state", header: "State", value: (extract) => describeState(extract).word, cell: stateOf, width: "10rem" },
  {
    id: "uploaded",
    header: "Uploaded",
    value: (extract) => extract.uploadedAt,
    cell: (extract) => (
      <span className="text-muted">
        {format.moment(extract.uploadedAt)} by {extract.uploadedBy.name}
      </span>
    ),
    from: "md",
  },
];

export const ExtractList = ({ extracts }: { extracts: readonly Extract[] }) => {
  const format = useChainFormat();
  return (
    <DataTable
      caption="Extracts, newest first"
      rows={extracts}
      columns={columnsFor(format)}
      rowKey={(extract) => extract.id}
      rowHeight={48}
    />
  );
};
