import { writeFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import { fitModel, termCurve } from "@shared/engine";
import type { FittedModel } from "@shared/engine";
import { basisRows } from "@shared/engine/basis/term-basis";
import { seededNormal, seededUniform } from "../../engine/support/generator";

/**
 * Draws how rows become a curve, from a fit of invented weeks, as SVG: the rows; the splines laid over the price; splines
 * times their coefficients, which the penalty keeps from jumping; their sum, with its band and the weeks it was learnt from.
 */
const colours = {
  paper: "#F5F3EC", sheet: "#FFFEFB", ink: "#1D2B2F", muted: "#5F6E72", hairline: "#DED9CC", price: "#3B5B92", pale: "#A9B8D3",
};
const sheet = { width: 262, height: 232, gap: 14 };
const plot = { left: 34, top: 52, width: 212, height: 138 };
const range = { from: 1, to: 2 };
const points = 121;

type Panel = { title: string; note: string; heights: [number, number]; draw: (scale: Scale) => string[] };
type Scale = { x: (price: number) => number; y: (height: number) => number };

/** Saves the picture. @returns the file's path from the project. */
export function saveCurvePicture(): string {
  const path = "infra/pictures/engine-curve.svg";
  writeFileSync(fileURLToPath(new URL(`../../../${path}`, import.meta.url)), curvePicture());
  return path;
}

export function curvePicture(): string {
  const rows = inventedRows();
  const model = fitModel({ response: "logUnits", family: "gaussian", terms: [{ kind: "smooth", column: "price", size: 9 }] }, rows);
  const panels = [rowsPanel(rows), splinesPanel(model), sumPanel(model), curvePanel(model, rows)];
  const width = panels.length * (sheet.width + sheet.gap) + sheet.gap;
  const height = sheet.height + 2 * sheet.gap;
  return `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${width} ${height}" font-family="Work Sans, Helvetica, Arial, sans-serif" font-size="11" role="img">
<title>How rows become a curve: weeks, splines, splines times coefficients, and their sum with its band</title>
<rect width="${width}" height="${height}" fill="${colours.paper}"/>
${panels.map((panel, index) => `<g transform="translate(${sheet.gap + index * (sheet.width + sheet.gap)} ${sheet.gap})">${drawPanel(panel)}</g>`).join("\n")}
</svg>
`;
}

type Rows = { price: number[]; logUnits: number[] };

function inventedRows(): Rows {
  const uniform = seededUniform(41);
  const normal = seededNormal(42);
  const price = Array.from({ length: 90 }, (_, week) => (week < 2 ? [range.from, range.to][week] : Math.round(100 * (1 + uniform() ** 1.3)) / 100));
  return { price, logUnits: price.map((value) => 4.4 - 1.1 * Math.tanh(5 * (value - 1.42)) - 0.5 * (value - 1.5) + 0.22 * normal()) };
}

const priceAt = (step: number): number => range.from + ((range.to - range.from) * step) / (points - 1);
const prices = Float64Array.from({ length: points }, (_, step) => priceAt(step));

/** Height of every spline at every price, one list per spline. */
function splineHeights(model: FittedModel): number[][] {
  const rows = basisRows(model.terms[0].basis, { price: prices });
  if (rows.storage !== "spline") throw new Error("a smooth has splines");
  return Array.from({ length: rows.width }, (_, column) => Array.from({ length: points }, (_unused, row) => {
    const k = column - rows.first[row];
    return k >= 0 && k < 4 ? rows.values[4 * row + k] : 0;
  }));
}

const rowsPanel = ({ price, logUnits }: Rows): Panel => ({
  title: "1  Weeks", note: "ln units by price", heights: [2.5, 6.5],
  draw: ({ x, y }) => price.map((value, week) => `<circle cx="${at(x(value))}" cy="${at(y(logUnits[week]))}" r="2.2" fill="${colours.ink}" fill-opacity="0.55"/>`),
});

const splinesPanel = (model: FittedModel): Panel => ({
  title: "2  Splines", note: "four are not zero at any price", heights: [0, 0.8],
  draw: (scale) => [
    ...splineHeights(model).map((heights, k) => line(heights, scale, k >= 2 && k < 6 ? colours.price : colours.pale)),
    `<path d="M${at(scale.x(1.42))} ${plot.top}V${plot.top + plot.height}" stroke="${colours.muted}" stroke-dasharray="2 3"/>`,
  ],
});

const sumPanel = (model: FittedModel): Panel => ({
  title: "3  Times coefficients", note: "a penalty keeps neighbours alike", heights: [-2, 2],
  draw: (scale) => splineHeights(model).map((heights, k) => {
    const coefficient = model.coefficients[model.terms[0].first + k];
    return line(heights.map((height) => height * coefficient), scale, colours.pale);
  }).concat(line(Array.from(termCurve(model, "price", { at: prices }).estimate), scale, colours.price)),
});

function curvePanel(model: FittedModel, { price }: Rows): Panel {
  const { lower, upper, estimate } = termCurve(model, "price", { at: prices });
  return {
    title: "4  The curve", note: "centred, with its 95 % band", heights: [-2, 2],
    draw: (scale) => {
      const edge = (values: Float64Array) => Array.from(values, (value, step) => `${at(scale.x(priceAt(step)))} ${at(scale.y(value))}`);
      return [
        `<path d="M${[...edge(lower), ...edge(upper).reverse()].join("L")}Z" fill="${colours.price}" fill-opacity="0.16"/>`,
        line(Array.from(estimate), scale, colours.price),
        ...price.map((value) => `<path d="M${at(scale.x(value))} ${plot.top + plot.height}v-5" stroke="${colours.ink}" stroke-opacity="0.5"/>`),
      ];
    },
  };
}

function drawPanel({ title, note, heights: [low, high], draw }: Panel): string {
  const scale: Scale = {
    x: (price) => plot.left + (plot.width * (price - range.from)) / (range.to - range.from),
    y: (height) => plot.top + plot.height * (1 - (height - low) / (high - low)),
  };
  const bottom = plot.top + plot.height;
  return [
    `<rect width="${sheet.width}" height="${sheet.height}" rx="8" fill="${colours.sheet}" stroke="${colours.hairline}"/>`,
    `<text x="16" y="24" font-weight="600" font-size="13" fill="${colours.ink}">${title}</text>`,
    `<text x="16" y="40" fill="${colours.muted}">${note}</text>`,
    `<path d="M${plot.left} ${bottom}H${plot.left + plot.width}M${plot.left} ${bottom}V${plot.top}" stroke="${colours.hairline}"/>`,
    ...draw(scale),
    ...[1, 1.25, 1.5, 1.75, 2].map((price) => `<text x="${at(scale.x(price))}" y="${bottom + 16}" text-anchor="middle" fill="${colours.muted}">${price.toFixed(2)}</text>`),
    ...[low, high].map((height) => `<text x="${plot.left - 5}" y="${at(scale.y(height) + 4)}" text-anchor="end" fill="${colours.muted}">${String(height).replace("-", "−")}</text>`),
    `<text x="${plot.left + plot.width / 2}" y="${bottom + 32}" text-anchor="middle" fill="${colours.muted}">price</text>`,
  ].join("");
}

const line = (heights: readonly number[], { x, y }: Scale, colour: string): string =>
  `<path d="${heights.map((height, step) => `${step === 0 ? "M" : "L"}${at(x(priceAt(step)))} ${at(y(height))}`).join("")}" fill="none" stroke="${colour}" stroke-width="1.5"/>`;

const at = (value: number): string => value.toFixed(1);
