import type { Store } from "@shared/contract/catalogue";
import type { Model } from "@shared/contract/drivers";
import { EmptyState } from "@/components/ui/empty-state";
import { Notice } from "@/components/ui/notice";
import { Sheet } from "@/components/ui/sheet";
import { useChainFormat } from "@/lib/format/chain-format";
import { countOf } from "@/lib/format/number";
import { chooseFit, chooseModel, newerCandidate, weeksNotLearnt } from "../view/choose-model";
import { CandidateNotice } from "./candidate-notice";
import { FitButton } from "./fit-button";
import { StoreDrivers } from "./store-drivers";

type ProductDriversProps = {
  models: readonly Model[];
  stores: readonly Store[];
  wantedModel: string | null;
  wantedStore: string | null;
  level: number;
  mayFit: boolean;
  onModel: (id: string) => void;
};

const stateWords = { "in-use": "In use", candidate: "Not in use", retired: "No longer in use" } as const;

/** The model chosen, in the store chosen. */
export const ProductDrivers = (props: ProductDriversProps) => {
  const { models, stores, wantedModel, wantedStore, level, mayFit, onModel } = props;
  const format = useChainFormat();
  const model = chooseModel(models, wantedModel);
  if (!model) return null;
  const nameOf = (code: string) => stores.find((store) => store.code === code)?.name ?? code;
  const fit = chooseFit(model, wantedStore);
  const waiting = model.state === "candidate" ? model : newerCandidate(models, model);
  const inUse = models.find(({ state }) => state === "in-use");
  const skipped = wantedStore ? model.skipped.find(({ store }) => store === wantedStore) : undefined;
  const newerWeeks = weeksNotLearnt(model, waiting);
  const fitButton = mayFit && <FitButton product={model.product} label="Fit anew" jobId={models[0].jobId} />;
  const isUnknown = wantedStore !== null && fit?.store !== wantedStore;
  return (
    <div className="flex flex-col gap-5">
      <div className="flex flex-wrap items-center justify-between gap-3">
        <p className="text-muted">
          {stateWords[model.state]}
          {model.usedFrom && ` since ${format.moment(model.usedFrom)}`} · fitted {format.moment(model.createdAt)} ·{" "}
          {model.fits.length} of {model.fits.length + model.skipped.length} stores learnt
        </p>
        {newerWeeks === 0 && fitButton}
      </div>
      {newerWeeks > 0 && (
        <Notice tone="neutral">
          <div className="flex flex-wrap items-center justify-between gap-3">
            <span>
              Newer weeks are loaded since this fit ({countOf(newerWeeks, "week")}): its curves do not know them yet.
              {!mayFit && " A planner or category manager can fit it anew."}
            </span>
            {fitButton}
          </div>
        </Notice>
      )}
      {waiting && (
        <CandidateNotice
          model={waiting}
          isShown={waiting.id === model.id}
          onShow={() => onModel(waiting.id)}
          onLeave={inUse && (() => onModel(inUse.id))}
        />
      )}
      {isUnknown || !fit ? (
        <Sheet>
          <EmptyState title={`Nothing is learnt of it in ${wantedStore ? nameOf(wantedStore) : "any store"}`}>
            {skipped?.reason ??
              "It was not sold there, or not in the weeks the model was fitted to. Choose another store."}
          </EmptyState>
        </Sheet>
      ) : (
        <StoreDrivers model={model} fit={fit} storeName={nameOf(fit.store)} level={level} />
      )}
    </div>
  );
};
