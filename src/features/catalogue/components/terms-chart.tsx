import { dayFromNumber, dayNumber } from "@shared/calendar";
import type { ProductTerms } from "@shared/contract/catalogue-products";
import { ChartFrame } from "@/components/charts/frame/chart-frame";
import { BottomAxis, LeftAxis } from "@/components/charts/parts/axes";
import { roundStep, ticksByStep } from "@/components/charts/scale/round-ticks";
import { linearScale } from "@/components/charts/scale/scale";
import { useChainFormat } from "@/lib/format/chain-format";
import { useElementWidth } from "@/lib/use-element-width";
import { stepPath } from "../view/step-path";
import { beginning } from "../view/product-words";
import { LineKey } from "./line-key";

const margin = { top: 20, right: 8, bottom: 26, left: 52 };
const height = 190;
const monthDays = 30;

/** Quarters' first days between two day numbers, as "Jan 2026" where the year begins. */
const quarterTicks = (from: number, to: number) => {
  const first = Number(dayFromNumber(from).slice(0, 4));
  const last = Number(dayFromNumber(to).slice(0, 4));
  const every = last - first > 4 ? ["01"] : last - first > 1 ? ["01", "07"] : ["01", "04", "07", "10"];
  const names: Record<string, string> = { "01": "Jan", "04": "Apr", "07": "Jul", "10": "Oct" };
  return Array.from({ length: last - first + 1 }, (_, index) => first + index)
    .flatMap((year) => every.map((month) => ({ value: dayNumber(`${year}-${month}-01`), label: `${names[month]} ${year}` })))
    .filter(({ value }) => value >= from && value <= to);
};

type TermsChartProps = { terms: readonly ProductTerms[]; today: string; name: string };

/** Regular price and cost by date, in steps. */
export const TermsChart = ({ terms, today, name }: TermsChartProps) => {
  const format = useChainFormat();
  const [plot, width] = useElementWidth<HTMLDivElement>(640);
  const dated = terms.filter(({ validFrom }) => validFrom !== beginning).map(({ validFrom }) => dayNumber(validFrom));
  const now = dayNumber(today);
  const from = Math.min(now - 12 * monthDays, ...dated.map((day) => day - monthDays));
  const until = Math.max(now, ...dated) + 3 * monthDays;
  const values = terms.flatMap(({ unitCost, regularPrice }) => [unitCost, regularPrice]).filter((value) => value !== null);
  const most = Math.max(...values, 0) || 1;
  const step = roundStep(0, most, 4);
  const top = Math.ceil(most / step + 0.05) * step;
  const x = linearScale({ domain: [from, until], range: [margin.left, width - margin.right] });
  const y = linearScale({ domain: [0, top], range: [height - margin.bottom, margin.top] });
  const at = ({ validFrom }: ProductTerms) => Math.max(from, dayNumber(validFrom));
  const steps = (value: (row: ProductTerms) => number | null) =>
    stepPath(terms.map((row) => ({ x: at(row), value: value(row) })), { x: x.toPixel, y: y.toPixel }, until);
  const title = `Regular price and cost of ${name} by date`;
  const table = () => ({
    columns: ["Valid from", "Regular price", "Cost", "Tax"],
    rows: terms.map((row) => [row.validFrom, row.regularPrice, row.unitCost, row.taxRate]),
    formats: [undefined, format.price, format.price, format.percent],
  });
  return (
    <ChartFrame title={title} heading="Regular price, tax included, and cost, net of tax" table={table} height={height} legend={<Legend />}>
      <div ref={plot} style={{ height }}>
        <svg width={width} height={height} role="img" aria-label={title}>
          <LeftAxis
            scale={y} ticks={ticksByStep(0, top, step).map((value) => ({ value, label: format.price(value) }))} left={margin.left - 4}
            right={width - margin.right}
          />
          <BottomAxis scale={x} ticks={quarterTicks(from, until)} y={height - margin.bottom} />
          <line className="chart-reference" x1={x.toPixel(now)} x2={x.toPixel(now)} y1={margin.top} y2={height - margin.bottom} />
          <text className="chart-text" x={x.toPixel(now)} y={margin.top - 7} textAnchor="middle">today</text>
          <path d={steps((row) => row.regularPrice)} fill="none" strokeWidth={2} className="stroke-[var(--driver-price)]" />
          <path d={steps((row) => row.unitCost)} fill="none" strokeWidth={2} strokeDasharray="5 3" className="stroke-[var(--muted)]" />
        </svg>
      </div>
    </ChartFrame>
  );
};

const Legend = () => (
  <p className="flex flex-wrap gap-x-5 gap-y-1 text-sm text-muted">
    <LineKey colour="--driver-price" looks="line">Regular price</LineKey>
    <LineKey colour="--muted" looks="dashed">Cost</LineKey>
  </p>
);
