import { useMemo } from "react";
import type { ReactNode } from "react";
import type { Scenario } from "@shared/contract/scenarios";
import { SumColumn } from "@/components/charts/sum-column/sum-column";
import { NumberField } from "@/components/ui/number-field";
import { Sheet } from "@/components/ui/sheet";
import { Term } from "@/components/ui/term";
import { useChainFormat } from "@/lib/format/chain-format";
import type { ChainFormat } from "@/lib/format/chain-format";
import { countOf, formatRange } from "@/lib/format/number";
import { formatPercentInterval } from "@/lib/format/percent";
import type { ScenarioFigures } from "../hooks/use-prediction";
import { sumParts } from "../view/sum-parts";

type SumSheetProps = {
  scenario: Scenario;
  figures: ScenarioFigures;
  fixedCost: number;
  onFixedCost: (cost: number) => void;
  cautions: ReactNode;
};

/** The sum of the parts, and what it comes to: units, lift, money. */
export const SumSheet = ({ scenario, figures, fixedCost, onFixedCost, cautions }: SumSheetProps) => {
  const format = useChainFormat();
  const { prediction } = figures;
  const { units, lift, level, weeks, stores } = prediction;
  const parts = useMemo(() => sumParts(prediction), [prediction]);
  return (
    <Sheet aria-label="Sum" className="flex flex-col">
      <p className="text-muted">
        {countOf(weeks.length, "week")}, {countOf(stores.length, "store")}
      </p>
      <p className="mt-0.5" data-testid="total">
        <span className="text-3xl font-bold tracking-[-0.02em]">{format.units(units.estimate)}</span>{" "}
        <span className="text-muted">
          units · {formatRange(format.units(units.lower), format.units(units.upper))}{" "}
          <Term meaning={`Of 100 plans like this one, about ${Math.round(level * 100)} are expected to sell within these bounds.`}>
            ({format.percent(level)})
          </Term>
        </span>
      </p>
      <div className="mt-3">
        <SumColumn
          title="From base to plan, in units"
          parts={parts}
          interval={{ lower: units.lower, upper: units.upper, level }}
          format={format.units}
          formatSigned={(value) => format.units(value, { signed: true })}
        />
      </div>
      <dl className="mt-3 divide-y divide-hairline border-t border-hairline">
        <Fact name={<Term meaning="Incremental units over base units: the same weeks at regular price, without promotion, in the same weather.">Lift on base</Term>}>
          <span data-testid="lift" data-lift={lift.estimate}>
            {format.percent(lift.estimate, { signed: true })}
          </span>{" "}
          · {formatPercentInterval(lift.lower, lift.upper)}{" "}
          <Term meaning={`The expected lift lies within in about ${Math.round(level * 100)} of 100 plans. That curves may be less smooth than they were learnt is allowed for, as going the same way in all stores.`}>
            ({format.percent(level)})
          </Term>
        </Fact>
        <MoneyFacts figures={figures} format={format} />
        <Fact name="Feature or display cost">
          <NumberField
            label="Feature or display cost, net of tax, for the whole plan"
            hideLabel
            value={fixedCost}
            min={0}
            max={1e9}
            step={10}
            format={(value) => format.money(value)}
            disabled={!scenario.may.edit}
            onChange={(value) => onFixedCost(value ?? 0)}
            className="h-8 w-28 text-right font-semibold"
          />
        </Fact>
        <BreakEvenFact figures={figures} format={format} />
      </dl>
      <div className="mt-4">{cautions}</div>
    </Sheet>
  );
};

const Fact = ({ name, children }: { name: ReactNode; children: ReactNode }) => (
  <div className="flex min-h-11 items-center justify-between gap-4 py-1.5">
    <dt className="text-muted">{name}</dt>
    <dd className="text-right font-semibold">{children}</dd>
  </div>
);

const MoneyFacts = ({ figures, format }: { figures: ScenarioFigures; format: ChainFormat }) => {
  const { netSales, grossMargin, netGain } = figures.prediction.money;
  const change = (amounts: { plan: number; base: number }) => `${format.money(amounts.plan - amounts.base, { signed: true })} on base`;
  return (
    <>
      <Fact name={<Term meaning="Price times units, without tax; then the change against the base: the same weeks at regular price, without promotion.">Net sales</Term>}>
        {format.money(netSales.plan)} · {change(netSales)}
      </Fact>
      <Fact name={<Term meaning="Net sales less unit costs, with the supplier's funding per unit; then the change against the base.">Gross margin</Term>}>
        {grossMargin ? `${format.money(grossMargin.plan)} · ${change(grossMargin)}` : "unit cost not known"}
      </Fact>
      {netGain !== null && (
        <Fact name={<Term meaning="Margin of the plan less margin of the base and less the plan's own costs.">Net gain</Term>}>
          {format.money(netGain, { signed: true })}
        </Fact>
      )}
    </>
  );
};

const BreakEvenFact = ({ figures, format }: { figures: ScenarioFigures; format: ChainFormat }) => {
  const { breakEven } = figures.prediction.money;
  const texts = {
    lift: () => (breakEven.kind === "lift" ? format.percent(breakEven.lift, { signed: true }) : ""),
    "none needed": () => "none needed",
    "cannot break even": () => "cannot break even",
    unknown: () => "unit cost not known",
  };
  return (
    <Fact name={<Term meaning="The lift at which the plan earns exactly what the base would.">Break-even lift</Term>}>{texts[breakEven.kind]()}</Fact>
  );
};
