import type { Extract } from "@shared/contract/extracts";
import { formatBytes } from "@/lib/format/bytes";
import { useChainFormat } from "@/lib/format/chain-format";
import { kindNames } from "../../view/extract-state";

const Fact = ({ name, children }: { name: string; children: string }) => (
  <div className="min-w-0">
    <dt className="text-sm text-muted">{name}</dt>
    <dd className="break-words">{children}</dd>
  </div>
);

/** What arrived, from whom, and the mark by which its bytes are known again. */
export const FileStep = ({ extract }: { extract: Extract }) => {
  const format = useChainFormat();
  return (
    <dl className="grid gap-x-8 gap-y-4 p-4 sm:grid-cols-2 sm:p-5 lg:grid-cols-4">
      <Fact name="It holds">{kindNames[extract.kind]}</Fact>
      <Fact name="Size">{formatBytes(extract.sizeBytes)}</Fact>
      <Fact name="Arrived">{`${format.moment(extract.uploadedAt)}, from ${extract.uploadedBy.name}`}</Fact>
      <Fact name="Checked">{format.moment(extract.checkedAt)}</Fact>
      <div className="min-w-0 sm:col-span-2 lg:col-span-4">
        <dt className="text-sm text-muted">Fingerprint (SHA-256): the same for the same bytes</dt>
        <dd>
          <code className="text-sm break-all">{extract.sha256}</code>
        </dd>
      </div>
    </dl>
  );
};
