import type { ReactNode } from "react";
import type { FitSummary, Model } from "@shared/contract/drivers";
import { Notice } from "@/components/ui/notice";
import { Sheet } from "@/components/ui/sheet";
import { Term } from "@/components/ui/term";
import { useChainFormat } from "@/lib/format/chain-format";
import { countOf } from "@/lib/format/number";
import { cautionsOf } from "../view/cautions";

const Fact = ({ name, children }: { name: ReactNode; children: ReactNode }) => (
  <div className="flex items-baseline justify-between gap-4 border-t border-hairline py-2 first:border-t-0">
    <dt className="text-muted">{name}</dt>
    <dd className="shrink-0 text-right font-medium">{children}</dd>
  </div>
);

/** What the curves were learnt from, how well they fit, and what to distrust. */
export const ModelFacts = ({ model, fit }: { model: Model; fit: FitSummary }) => {
  const format = useChainFormat();
  const cautions = cautionsOf(model, fit);
  const { leftOut, partly } = fit.stockOuts;
  return (
    <Sheet heading="What it was learnt from" className="self-start">
      <dl>
        <Fact name="Weeks">
          {format.number(fit.rows)}
          <span className="block text-sm font-normal text-muted">{format.weekSpan(fit.firstWeek, fit.lastWeek)}</span>
        </Fact>
        <Fact name="Mean week">{format.units(fit.meanWeeklyUnits)} units</Fact>
        {fit.meanBaseUnits !== null && (
          <Fact
            name={
              <Term meaning="What the same weeks would have sold at regular price without promotion.">Mean base</Term>
            }
          >
            {format.units(fit.meanBaseUnits)} units
          </Fact>
        )}
        <Fact name="Price moved without promotion">
          in {countOf(fit.priceLearning.weeksMoved, "week")}
          <span className="block text-sm font-normal text-muted">
            {countOf(fit.priceLearning.regularPrices, "regular price")}
          </span>
        </Fact>
        <Fact name="Sold out">
          {leftOut + partly === 0 ? "never" : `${countOf(leftOut, "week")} left out`}
          {partly > 0 && (
            <span className="block text-sm font-normal text-muted">{countOf(partly, "week")} counted in part</span>
          )}
        </Fact>
        {fit.devianceExplained !== null && (
          <Fact
            name={
              <Term meaning="How much of the weeks' ups and downs the drivers account for: 100 % would be all of it.">
                Deviance explained
              </Term>
            }
          >
            {format.percent(fit.devianceExplained)}
          </Fact>
        )}
        <Fact
          name={
            <Term meaning="Effective degrees of freedom: how much freedom the curves took. A straight line takes one.">
              Effective degrees of freedom
            </Term>
          }
        >
          {format.number(fit.edf, { digits: 1 })}
        </Fact>
        <Fact
          name={
            <Term meaning="How much wider than pure chance the weeks scatter: 1 would be pure chance. Bands allow for it.">
              Dispersion
            </Term>
          }
        >
          {format.multiplier(fit.dispersion)}
        </Fact>
      </dl>
      <div className="mt-3 flex flex-col gap-3">
        {cautions.length > 0 && (
          <Notice>
            <ul className="flex flex-col gap-1.5">
              {cautions.map((caution) => (
                <li key={caution}>{caution}</li>
              ))}
            </ul>
          </Notice>
        )}
        <p className="text-sm text-muted">
          Curves describe past weeks; they do not prove cause. What moved only together, such as a price that was cut
          only in promotions, cannot be told apart.
        </p>
      </div>
    </Sheet>
  );
};
