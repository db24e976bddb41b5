import type { LabelledTick } from "./month-ticks";
import type { Scale } from "./scale";

/** Rough width of a label in the charts' small type, without asking the page to measure. */
export const labelWidth = (text: string, pixelsPerCharacter = 6.6): number => text.length * pixelsPerCharacter;

/** Drops labels that would run into the one before; ticks keep their places, so what stays is still exact. */
export const labelsThatFit = (ticks: readonly LabelledTick[], scale: Scale, gap = 8): LabelledTick[] => {
  const kept: LabelledTick[] = [];
  let taken = -Infinity;
  for (const tick of ticks) {
    const middle = scale.toPixel(tick.value);
    const half = labelWidth(tick.label) / 2;
    if (middle - half < taken + gap) continue;
    kept.push(tick);
    taken = middle + half;
  }
  return kept;
};

/** A label over at most two lines within a width; what does not fit ends in an ellipsis. */
export const wrapLabel = (text: string, width: number, pixelsPerCharacter = 7.2): string[] => {
  const most = Math.max(4, Math.floor(width / pixelsPerCharacter));
  if (text.length <= most) return [text];
  const cut = text.lastIndexOf(" ", most);
  const first = cut > 0 ? text.slice(0, cut) : text;
  const rest = cut > 0 ? text.slice(cut + 1) : "";
  return [first, rest].filter(Boolean).map((line) => (line.length <= most ? line : `${line.slice(0, most - 1)}…`));
};
