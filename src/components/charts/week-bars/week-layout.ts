import { linearScale } from "../scale/scale";
import type { Scale } from "../scale/scale";

/** A week that was: null where nothing was recorded, which stays a gap. */
export type PastWeek = { week: string; label: string; year: number; units: number | null };
export type PlanWeek = { week: string; label: string; year: number; units: number; lower: number; upper: number; base: number };

export type WeekBar = { week: string; label: string; year: number; left: number; width: number; middle: number };

export type WeekLayout = { past: (WeekBar & { index: number })[]; plan: WeekBar[]; y: Scale; dividerX: number | null };

type WeekLayoutOptions = {
  past: readonly PastWeek[];
  plan: readonly PlanWeek[];
  left: number;
  right: number;
  range: readonly [number, number];
};

const narrowestPast = 7;
const widestPlan = 46;
const gapBetween = 20;

/** Plan weeks get wide places, past weeks share the rest; those furthest back are left out where they would not fit. */
export const weekLayout = ({ past, plan, left, right, range }: WeekLayoutOptions): WeekLayout => {
  const whole = right - left;
  const planPlace =
    plan.length === 0 ? 0 : Math.min(widestPlan * 1.25, (whole * (past.length ? 0.5 : 1)) / plan.length);
  const room = whole - planPlace * plan.length - (plan.length && past.length ? gapBetween : 0);
  const kept = past.slice(Math.max(0, past.length - Math.floor(room / narrowestPast)));
  const pastPlace = kept.length ? Math.min(planPlace || widestPlan, room / kept.length) : 0;
  const planLeft = right - planPlace * plan.length;
  const pastLeft = planLeft - (plan.length && kept.length ? gapBetween : 0) - pastPlace * kept.length;
  const values = [
    ...kept.map((week) => week.units ?? 0),
    ...plan.flatMap((week) => [week.units, week.upper, week.base]),
    1,
  ];
  return {
    past: kept.map((week, index) => ({
      ...barIn(week, pastLeft + index * pastPlace, pastPlace),
      index: past.length - kept.length + index,
    })),
    plan: plan.map((week, index) => barIn(week, planLeft + index * planPlace, planPlace)),
    y: linearScale({ domain: [0, Math.max(...values) * 1.04], range }),
    dividerX: plan.length && kept.length ? planLeft - gapBetween / 2 : null,
  };
};

const barIn = ({ week, label, year }: Pick<PlanWeek, "week" | "label" | "year">, start: number, place: number): WeekBar => {
  const width = place * (place > 24 ? 0.78 : 0.72);
  return { week, label, year, width, left: start + (place - width) / 2, middle: start + place / 2 };
};

/** Every how many bars a label fits. */
export const labelEvery = (place: number, labelPixels = 46): number => Math.max(1, Math.ceil(labelPixels / place));

/** Half a label, with a little air. */
const halfLabelPixels = 22;

/** Which of the past bars carry a label: every so many, and none so near the right end that it would reach beyond. */
export const labelledPast = (bars: WeekLayout["past"]): WeekLayout["past"] => {
  if (bars.length < 2) return bars;
  const place = bars[1].left - bars[0].left;
  const every = labelEvery(place);
  const free = Math.min(every - 1, Math.ceil(halfLabelPixels / place));
  return bars.filter((_, at) => (bars.length - 1 - at) % every === free);
};
