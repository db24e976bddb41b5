import { readFileSync } from "node:fs";
import { describe, expect, it } from "vitest";

/** Tokens of src/styles/tokens.css by name, light and dark. */
const tokens = new Map(
  [
    ...readFileSync("src/styles/tokens.css", "utf8").matchAll(
      /--([\w-]+): light-dark\((#[0-9a-f]{6}), (#[0-9a-f]{6})\)/g,
    ),
  ].map(([, name, light, dark]) => [name, { light, dark }]),
);

type Mode = "light" | "dark";
const modes: Mode[] = ["light", "dark"];

const token = (name: string, mode: Mode): string => {
  const found = tokens.get(name);
  if (!found) throw new Error(`There is no token --${name}.`);
  return found[mode];
};

const channels = (colour: string) =>
  [1, 3, 5].map((start) => Number.parseInt(colour.slice(start, start + 2), 16) / 255);

const linear = (channel: number) => (channel <= 0.04045 ? channel / 12.92 : ((channel + 0.055) / 1.055) ** 2.4);

/** Relative luminance, WCAG 2.2. */
const luminance = (colour: string) => {
  const [red, green, blue] = channels(colour).map(linear);
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
};

const contrast = (one: string, other: string) => {
  const [low, high] = [luminance(one), luminance(other)].sort((a, b) => a - b);
  return (high + 0.05) / (low + 0.05);
};

/** A colour laid over another, as `color-mix(in srgb, …)` does. */
const mix = (over: string, under: string, share: number) => {
  const [a, b] = [channels(over), channels(under)];
  const part = a.map((value, index) => Math.round((value * share + b[index] * (1 - share)) * 255));
  return `#${part.map((value) => value.toString(16).padStart(2, "0")).join("")}`;
};

const drivers = ["price", "week", "temperature", "promotion", "trend", "event"];
const groups = [1, 2, 3, 4, 5, 6];

/** Text and the ground it stands on: 4.5 to 1. */
const texts: [string, string][] = [
  ...["paper", "sheet", "raised", "hover"].flatMap((ground): [string, string][] => [
    ["ink", ground],
    ["muted", ground],
  ]),
  ["accent", "sheet"],
  ["accent", "accent-soft"],
  ["accent", "paper"],
  ["ink", "accent-soft"],
  ["on-accent", "accent"],
  ["on-accent", "accent-strong"],
  ["sheet", "ink"],
  ["danger", "sheet"],
  ["danger", "danger-soft"],
  ["good", "good-soft"],
  ["caution", "caution-soft"],
  ["caution", "sheet"],
  ...drivers.map((driver): [string, string] => [`driver-${driver}-text`, "sheet"]),
];

/** Marks and borders of controls: 3 to 1. */
const marks: [string, string][] = [
  ["control", "sheet"],
  ["control", "paper"],
  ["accent", "paper"],
  ["track", "sheet"],
  ["base-bar", "sheet"],
  ["history-bar", "sheet"],
  ["plan-bar", "sheet"],
  ...drivers.map((driver): [string, string] => [`driver-${driver}`, "sheet"]),
  ...groups.map((group): [string, string] => [`group-${group}`, "sheet"]),
];

describe.each(modes)("in the %s theme", (mode) => {
  it.each(texts)("text in %s can be read on %s", (text, ground) => {
    expect(contrast(token(text, mode), token(ground, mode))).toBeGreaterThanOrEqual(4.5);
  });

  it.each(marks)("marks in %s stand out from %s", (mark, ground) => {
    expect(contrast(token(mark, mode), token(ground, mode))).toBeGreaterThanOrEqual(3);
  });

  it.each(drivers)("text of %s can be read on its own soft ground", (driver) => {
    const ground = mix(token(`driver-${driver}`, mode), token("sheet", mode), 0.14);
    expect(contrast(token(`driver-${driver}-text`, mode), ground)).toBeGreaterThanOrEqual(4.5);
    expect(contrast(token("ink", mode), ground)).toBeGreaterThanOrEqual(4.5);
  });
});

/** Dichromatic vision: Viénot, Brettel & Mollon, Color Research and Application 24 (1999) 243-252, on linear RGB. */
const dichromat: Record<"protan" | "deutan", number[][]> = {
  protan: [
    [0.11238, 0.88762, 0],
    [0.11238, 0.88762, 0],
    [0.00401, -0.00401, 1],
  ],
  deutan: [
    [0.29275, 0.70725, 0],
    [0.29275, 0.70725, 0],
    [-0.02234, 0.02234, 1],
  ],
};

const lab = (rgb: number[]) => {
  const [red, green, blue] = rgb;
  const xyz = [
    (0.4124 * red + 0.3576 * green + 0.1805 * blue) / 0.95047,
    0.2126 * red + 0.7152 * green + 0.0722 * blue,
    (0.0193 * red + 0.1192 * green + 0.9505 * blue) / 1.08883,
  ].map((value) => (value > 0.008856 ? Math.cbrt(value) : 7.787 * value + 16 / 116));
  return [116 * xyz[1] - 16, 500 * (xyz[0] - xyz[1]), 200 * (xyz[1] - xyz[2])];
};

const seenBy = (colour: string, kind: keyof typeof dichromat) => {
  const rgb = channels(colour).map(linear);
  return lab(
    dichromat[kind].map((row) =>
      Math.max(
        0,
        row.reduce((sum, weight, index) => sum + weight * rgb[index], 0),
      ),
    ),
  );
};

const apart = (a: number[], b: number[]) => Math.hypot(...a.map((value, index) => value - b[index]));

describe.each(modes)("for the colour-blind, in the %s theme", (mode) => {
  // Lanes are labelled and kept apart; in the sum column these four stand side by side. 8 in Lab is plainly another colour.
  it.each(["protan", "deutan"] as const)("the sum column's drivers stay apart to %s eyes", (kind) => {
    const names = ["price", "week", "temperature", "promotion"];
    for (const [index, one] of names.entries()) {
      for (const other of names.slice(index + 1)) {
        const distance = apart(
          seenBy(token(`driver-${one}`, mode), kind),
          seenBy(token(`driver-${other}`, mode), kind),
        );
        expect(distance, `${one} and ${other}`).toBeGreaterThan(8);
      }
    }
  });

  it.each(["protan", "deutan"] as const)("the first three groups of stores stay apart to %s eyes", (kind) => {
    for (const [one, other] of [
      [1, 2],
      [1, 3],
      [2, 3],
    ]) {
      const distance = apart(seenBy(token(`group-${one}`, mode), kind), seenBy(token(`group-${other}`, mode), kind));
      expect(distance, `${one} and ${other}`).toBeGreaterThan(8);
    }
  });
});
