import { Button } from "@/components/ui/button";
import { Notice } from "@/components/ui/notice";
import { useChainFormat } from "@/lib/format/chain-format";
import { countOf } from "@/lib/format/number";
import type { ModelOffer } from "../view/model-offer";

type ModelNoticeProps = { offer: ModelOffer; mayEdit: boolean; onTake: () => void };

/** Another model is in use now than the plan's own: a person decides whether the plan takes it. */
export const ModelNotice = ({ offer, mayEdit, onTake }: ModelNoticeProps) => {
  const format = useChainFormat();
  const { learnt, stores } = offer;
  const isUsable = learnt > 0;
  return (
    <div className="mb-4 print:hidden">
      <Notice tone="neutral">
        <div className="flex flex-wrap items-center justify-between gap-3">
          <span>
            Another model is in use now, fitted {format.moment(offer.fittedAt)}. This plan keeps its own
            {mayEdit && isUsable ? " until you take the other." : "."}
            {!isUsable && " The other knows none of its stores."}
            {isUsable && learnt < stores && ` The other knows ${learnt} of its ${countOf(stores, "store")}.`}
          </span>
          {mayEdit && isUsable && (
            <Button size="small" onClick={onTake}>
              Take the model in use
            </Button>
          )}
        </div>
      </Notice>
    </div>
  );
};
