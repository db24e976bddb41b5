import { useState } from "react";
import type { SavedLayout } from "@shared/contract/saved-layouts";
import { Button } from "@/components/ui/button";
import { DataTable } from "@/components/ui/data-table";
import type { TableColumn } from "@/components/ui/data-table-columns";
import { useChainFormat } from "@/lib/format/chain-format";
import type { ChainFormat } from "@/lib/format/chain-format";
import { kindNames } from "../../view/extract-state";
import { layoutSentence } from "../../view/layout-words";
import { ForgetLayoutDialog } from "./forget-layout-dialog";
import { RenameLayoutDialog } from "./rename-layout-dialog";

type Asked = { what: "rename" | "forget"; saved: SavedLayout };

const columnsFor = (format: ChainFormat, ask: ((asked: Asked) => void) | null): TableColumn<SavedLayout>[] => [
  { id: "name", header: "Layout", value: ({ name }) => name, cell: ({ name }) => <span className="font-medium">{name}</span> },
  { id: "kind", header: "Reads", value: ({ kind }) => kindNames[kind], width: "8rem", from: "sm" },
  {
    id: "how",
    header: "How",
    value: ({ layout }) => layoutSentence(layout),
    cell: ({ layout }) => <span className="text-muted">{layoutSentence(layout)}</span>,
    from: "lg",
  },
  {
    id: "used",
    header: "Last used",
    value: ({ lastUsedAt }) => lastUsedAt,
    cell: ({ lastUsedAt }) => (lastUsedAt ? format.moment(lastUsedAt) : <span className="text-muted">not yet</span>),
    from: "sm",
  },
  {
    id: "changed",
    header: "Changed",
    value: ({ updatedAt }) => updatedAt,
    cell: ({ updatedAt, updatedBy }) => (
      <span className="text-muted">
        {format.moment(updatedAt)} by {updatedBy.name}
      </span>
    ),
    from: "md",
  },
  ...(ask
    ? [
        {
          id: "do",
          header: "",
          value: () => null,
          sortable: false,
          align: "right" as const,
          cell: (saved: SavedLayout) => (
            <span className="inline-flex gap-2">
              <Button size="small" onClick={() => ask({ what: "rename", saved })} aria-label={`Rename ${saved.name}`}>
                Rename
              </Button>
              <Button size="small" onClick={() => ask({ what: "forget", saved })} aria-label={`Forget ${saved.name}`}>
                Forget
              </Button>
            </span>
          ),
        },
      ]
    : []),
];

/** The layouts kept for sources; those who may, rename and forget them here. */
export const LayoutList = ({ layouts, mayChange }: { layouts: readonly SavedLayout[]; mayChange: boolean }) => {
  const format = useChainFormat();
  const [asked, ask] = useState<Asked | null>(null);
  const close = () => ask(null);
  return (
    <>
      <DataTable
        caption="Saved layouts"
        rows={layouts}
        columns={columnsFor(format, mayChange ? ask : null)}
        rowKey={({ id }) => id}
        rowHeight={48}
      />
      {asked?.what === "rename" && <RenameLayoutDialog key={asked.saved.id} saved={asked.saved} onClose={close} />}
      {asked?.what === "forget" && <ForgetLayoutDialog saved={asked.saved} onClose={close} />}
    </>
  );
};
