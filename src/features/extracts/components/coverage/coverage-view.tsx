import { ChevronLeft, ChevronRight } from "lucide-react";
import { addWeeks } from "@shared/calendar";
import type { Coverage } from "@shared/contract/coverage";
import { CoverageMap } from "@/components/charts/coverage-map/coverage-map";
import { Checkbox } from "@/components/ui/checkbox";
import { IconButton } from "@/components/ui/icon-button";
import { Notice } from "@/components/ui/notice";
import { SegmentedControl } from "@/components/ui/segmented-control";
import { useChainFormat } from "@/lib/format/chain-format";
import { coverageSentence, coverageSpans, needsALook } from "../../view/coverage-sentence";
import type { CoverageSpan } from "../../view/coverage-sentence";

type CoverageViewProps = {
  coverage: Coverage;
  span: CoverageSpan;
  onSpan: (span: CoverageSpan) => void;
  /** Null shows up to the newest week. */
  onUntil: (week: string | null) => void;
  isNewest: boolean;
  wantsLooksOnly: boolean;
  onLooksOnly: (only: boolean) => void;
  onOpenExtract: (extractId: string) => void;
};

/** The picture with what chooses its weeks and stores. */
export const CoverageView = (props: CoverageViewProps) => {
  const { coverage, span, onSpan, onUntil, isNewest, wantsLooksOnly, onLooksOnly, onOpenExtract } = props;
  const format = useChainFormat();
  const { weeks, extracts } = coverage;
  const stores = wantsLooksOnly ? coverage.stores.filter(needsALook) : coverage.stores;
  const last = weeks[weeks.length - 1];
  const step = Math.floor(Number(span) / 2);
  return (
    <>
      {coverage.isBehind && (
        <div className="mb-4">
          <Notice tone="neutral" role="status">
            A file was just loaded or withdrawn; its weeks are being counted, and this picture follows by itself.
          </Notice>
        </div>
      )}
      <div className="mb-4 flex flex-wrap items-center gap-x-5 gap-y-3">
        <SegmentedControl label="How many weeks" segments={coverageSpans} value={span} onChange={onSpan} />
        <div className="flex items-center gap-1">
          <IconButton label="Earlier weeks" onClick={() => onUntil(addWeeks(last, -step))}>
            <ChevronLeft />
          </IconButton>
          <span className="text-muted">{format.weekSpan(weeks[0], last)}</span>
          {!isNewest && (
            <IconButton label="Newest weeks" onClick={() => onUntil(null)}>
              <ChevronRight />
            </IconButton>
          )}
        </div>
        <Checkbox
          label="Only stores with something missing, thin or withdrawn"
          checked={wantsLooksOnly}
          onChange={(event) => onLooksOnly(event.target.checked)}
        />
      </div>
      {stores.length === 0 ? (
        <p className="py-6 text-muted">Nothing is missing, thin or withdrawn in these weeks: every store is whole.</p>
      ) : (
        <CoverageMap
          title={coverageSentence({ stores, weeks }, format)}
          weeks={weeks}
          stores={stores}
          files={extracts.map(({ fileName }) => fileName)}
          onOpenFile={(file) => onOpenExtract(extracts[file].id)}
        />
      )}
    </>
  );
};
