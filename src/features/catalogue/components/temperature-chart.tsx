import type { TemperatureWeek } from "@shared/contract/catalogue-temperatures";
import { ChartFrame } from "@/components/charts/frame/chart-frame";
import { BottomAxis, LeftAxis } from "@/components/charts/parts/axes";
import { roundTicks } from "@/components/charts/scale/round-ticks";
import { linearScale } from "@/components/charts/scale/scale";
import { useChainFormat } from "@/lib/format/chain-format";
import { useElementWidth } from "@/lib/use-element-width";
import { extentOf, runsOf } from "../view/temperature-lines";
import { LineKey } from "./line-key";

const margin = { top: 10, right: 20, bottom: 26, left: 40 };
const height = 260;
const labelEvery = 4;

type TemperatureChartProps = { place: string; year: number; weeks: readonly TemperatureWeek[] };

/** A year's weekly means against what the other years say is usual. */
export const TemperatureChart = ({ place, year, weeks }: TemperatureChartProps) => {
  const format = useChainFormat();
  const [plot, width] = useElementWidth<HTMLDivElement>(900);
  const extent = extentOf(weeks) ?? [0, 20];
  const x = linearScale({ domain: [0, Math.max(1, weeks.length - 1)], range: [margin.left, width - margin.right] });
  const y = linearScale({ domain: [extent[0] - 1, extent[1] + 1], range: [height - margin.bottom, margin.top] });
  const at = ({ index, value }: { index: number; value: number }) => `${x.toPixel(index).toFixed(2)} ${y.toPixel(value).toFixed(2)}`;
  const lines = (value: (week: TemperatureWeek) => number | null) => runsOf(weeks, value).map((run) => `M${run.map(at).join("L")}`).join("");
  const title = `Weekly mean temperatures of ${place} in ${year}, and what is usual`;
  const ticks = weeks.map((week, index) => ({ value: index, label: `wk ${format.weekNumber(week.week)}` })).filter((_, index) => index % labelEvery === 0);
  const table = () => ({
    columns: ["Week", "Mean, °C", "Usual, °C", "Coldest other year, °C", "Warmest other year, °C"],
    rows: weeks.map(({ week, temperatureC, normalC, lowC, highC }) => [week, temperatureC, normalC, lowC, highC]),
    formats: [undefined, ...Array.from({ length: 4 }, () => (value: number) => format.number(value, { digits: 1 }))],
  });
  return (
    <ChartFrame title={title} table={table} height={height} legend={<Legend year={year} />}>
      <div ref={plot} style={{ height }} data-driver="temperature">
        <svg width={width} height={height} role="img" aria-label={title}>
          <LeftAxis
            scale={y} ticks={roundTicks(y.domain[0], y.domain[1], 6).map((value) => ({ value, label: format.degrees(value) }))}
            left={margin.left - 4} right={width - margin.right}
          />
          <BottomAxis scale={x} ticks={ticks} y={height - margin.bottom} />
          {runsOf(weeks, ({ lowC }) => lowC).map((run) => (
            <path
              key={run[0].index} className="fill-[var(--driver-soft)]"
              d={`M${run.map(({ index }) => at({ index, value: weeks[index].highC ?? 0 })).join("L")}L${[...run].reverse().map(at).join("L")}Z`}
            />
          ))}
          <path d={lines(({ normalC }) => normalC)} fill="none" strokeWidth={1.5} strokeDasharray="5 4" className="stroke-[var(--driver-text)]" />
          <path d={lines(({ temperatureC }) => temperatureC)} fill="none" strokeWidth={2.25} className="stroke-[var(--driver)]" strokeLinejoin="round" />
          {runsOf(weeks, ({ temperatureC }) => temperatureC).flat().map(({ index, value }) => (
            <circle key={index} cx={x.toPixel(index)} cy={y.toPixel(value)} r={2.5} className="fill-[var(--driver)]" />
          ))}
        </svg>
      </div>
    </ChartFrame>
  );
};

const Legend = ({ year }: { year: number }) => (
  <p className="flex flex-wrap gap-x-5 gap-y-1 text-sm text-muted" data-driver="temperature">
    <LineKey colour="--driver" looks="line">{year}</LineKey>
    <LineKey colour="--driver-text" looks="dashed">usual: mean of the other years at this time</LineKey>
    <LineKey colour="--driver-soft" looks="band">coldest to warmest of the other years, a week to either side</LineKey>
  </p>
);
