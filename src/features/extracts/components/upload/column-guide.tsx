import { useState } from "react";
import { extractColumns } from "@shared/contract/extract-columns";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import { SegmentedControl } from "@/components/ui/segmented-control";
import { kindNames } from "../../view/extract-state";

const kinds = (Object.keys(kindNames) as ExtractKind[]).map((value) => ({ value, label: kindNames[value] }));

/** What each kind of file holds, column by column, for people who make one. */
export const ColumnGuide = ({ kind }: { kind: ExtractKind }) => {
  const [looked, setLooked] = useState<ExtractKind | null>(null);
  const shown = looked ?? kind;
  return (
    <details className="mt-4 border-t border-hairline pt-3 print:hidden">
      <summary className="w-fit cursor-pointer rounded-xs text-sm font-medium text-accent">
        Which columns a file needs
      </summary>
      <SegmentedControl className="mt-3" label="Kind of file" segments={kinds} value={shown} onChange={setLooked} />
      <dl className="mt-3 grid gap-x-8 gap-y-1.5 text-sm md:grid-cols-2">
        {extractColumns[shown].map(({ name, needed, holds }) => (
          <div key={name} className="grid grid-cols-[8.5rem_minmax(0,1fr)] gap-3">
            <dt>
              <code className={needed ? "font-semibold text-ink" : "text-muted"}>{name}</code>
            </dt>
            <dd className="text-muted">
              {holds}
              {!needed && " (optional)"}
            </dd>
          </div>
        ))}
      </dl>
    </details>
  );
};
