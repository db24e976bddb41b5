import type { Model } from "@shared/contract/drivers";
import { Button } from "@/components/ui/button";
import { Notice } from "@/components/ui/notice";
import { useStatusLine } from "@/components/ui/status-line";
import { ApiError } from "@/lib/api-error";
import { useChainFormat } from "@/lib/format/chain-format";
import { countOf } from "@/lib/format/number";
import { usePutModelInUse } from "../api/put-in-use";

type CandidateNoticeProps = {
  model: Model;
  isShown: boolean;
  onShow: () => void;
  /** Back to the model in use, where there is one. */
  onLeave?: () => void;
};

/** A fit that is not in use: a person looks at its curves and puts it in use, or leaves it. */
export const CandidateNotice = ({ model, isShown, onShow, onLeave }: CandidateNoticeProps) => {
  const format = useChainFormat();
  const status = useStatusLine();
  const putInUse = usePutModelInUse(model.product);
  return (
    <Notice tone="neutral">
      <div className="flex flex-wrap items-center justify-between gap-3">
        <span>
          {isShown ? "You are looking at a fit that is not in use" : "A newer fit waits to be looked at"}: made{" "}
          {format.moment(model.createdAt)} by {model.createdBy}, {countOf(model.fits.length, "store")}.
          {isShown && !model.may.use && " A category manager can put it in use."}
        </span>
        <span className="flex gap-2">
          {!isShown && (
            <Button size="small" onClick={onShow}>
              Look at its curves
            </Button>
          )}
          {isShown && onLeave && (
            <Button size="small" onClick={onLeave}>
              Back to the model in use
            </Button>
          )}
          {isShown && model.may.use && (
            <Button
              size="small"
              tone="primary"
              busy={putInUse.isPending}
              onClick={() =>
                putInUse.mutate(model.id, {
                  onSuccess: () => status.done("This model is now in use."),
                  onError: (error) =>
                    status.failed(error instanceof ApiError ? error.detail : "It was not put in use. Try again."),
                })
              }
            >
              Put in use
            </Button>
          )}
        </span>
      </div>
    </Notice>
  );
};
