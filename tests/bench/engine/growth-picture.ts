import { writeFileSync } from "node:fs";
import { fileURLToPath } from "node:url";
import type { GrowthPanel } from "./growth";

const colours = { paper: "#F5F3EC", sheet: "#FFFEFB", ink: "#1D2B2F", muted: "#5F6E72", hairline: "#DED9CC", lines: ["#17414F", "#B97A12"] };
const sheet = { width: 328, height: 268, gap: 16 };
const plot = { left: 46, top: 44, width: 252, height: 168 };

/** Draws the panels beside each other as SVG and saves them. @returns the file's path from the project. */
export function saveGrowthPicture(panels: readonly GrowthPanel[]): string {
  const path = "infra/pictures/engine-growth.svg";
  writeFileSync(fileURLToPath(new URL(`../../../${path}`, import.meta.url)), growthPicture(panels));
  return path;
}

export function growthPicture(panels: readonly GrowthPanel[]): string {
  const width = panels.length * (sheet.width + sheet.gap) + sheet.gap;
  const height = sheet.height + 2 * sheet.gap;
  const parts = panels.map((panel, index) => group(sheet.gap + index * (sheet.width + sheet.gap), sheet.gap, drawPanel(panel)));
  return `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${width} ${height}" font-family="Work Sans, Helvetica, Arial, sans-serif" font-size="11" role="img">
<title>Milliseconds a fit takes, by rows, stores and terms</title>
<rect width="${width}" height="${height}" fill="${colours.paper}"/>
${parts.join("\n")}
</svg>
`;
}

function drawPanel({ title, across, lines }: GrowthPanel): string {
  const points = lines.flatMap((line) => line.points);
  const [sizes, times] = [roundTicks(Math.max(...points.map(({ size }) => size))), roundTicks(Math.max(...points.map(({ ms }) => ms)))];
  const x = (size: number) => plot.left + (plot.width * size) / sizes[sizes.length - 1];
  const y = (ms: number) => plot.top + plot.height * (1 - ms / times[times.length - 1]);
  const bottom = plot.top + plot.height;
  return [
    `<rect width="${sheet.width}" height="${sheet.height}" rx="8" fill="${colours.sheet}" stroke="${colours.hairline}"/>`,
    text({ x: 16, y: 24, of: title, style: `font-weight="600" font-size="13" fill="${colours.ink}"` }),
    text({ x: sheet.width - 16, y: 24, of: "ms a fit, processor time", style: `text-anchor="end" fill="${colours.muted}"` }),
    ...times.map((ms) => rule(plot.left, y(ms), plot.left + plot.width, y(ms)) + label(plot.left - 6, y(ms) + 4, ms, "end")),
    ...sizes.map((size) => rule(x(size), bottom, x(size), bottom + 4) + label(x(size), bottom + 17, size, "middle")),
    text({ x: plot.left + plot.width / 2, y: bottom + 38, of: across, style: `text-anchor="middle" fill="${colours.muted}"` }),
    ...lines.map((line, index) => drawLine(line, { index, x, y })),
  ].join("\n");
}

type Placing = { index: number; x: (size: number) => number; y: (ms: number) => number };

/** Shapes differ as well as colours: discs and squares. */
function drawLine({ label: name, points }: GrowthPanel["lines"][number], { index, x, y }: Placing): string {
  const colour = colours.lines[index];
  const path = points.map(({ size, ms }, at) => `${at === 0 ? "M" : "L"}${tenths(x(size))} ${tenths(y(ms))}`).join("");
  const mark = (left: number, top: number) => (index === 0
    ? `<circle cx="${tenths(left)}" cy="${tenths(top)}" r="3" fill="${colour}"/>`
    : `<rect x="${tenths(left - 3)}" y="${tenths(top - 3)}" width="6" height="6" fill="${colour}"/>`);
  const key = plot.top + 10 + 16 * index;
  return [
    `<path d="${path}" fill="none" stroke="${colour}" stroke-width="1.5"/>`, ...points.map(({ size, ms }) => mark(x(size), y(ms))),
    mark(plot.left + 12, key - 4), text({ x: plot.left + 21, y: key, of: name, style: `fill="${colours.ink}"` }),
  ].join("");
}

/** From zero to the largest value or just beyond it, in at most seven steps of 1, 2 or 5 times a power of ten. */
export function roundTicks(largest: number): number[] {
  const power = 10 ** Math.floor(Math.log10(largest / 7));
  const step = power * ([1, 2, 5].find((factor) => largest / (power * factor) <= 7) ?? 10);
  return Array.from({ length: Math.ceil(largest / step - 1e-9) + 1 }, (_, index) => Number((index * step).toPrecision(12)));
}

const tenths = (value: number) => String(Math.round(10 * value) / 10);
const group = (left: number, top: number, content: string) => `<g transform="translate(${left} ${top})">\n${content}\n</g>`;
const rule = (x1: number, y1: number, x2: number, y2: number) =>
  `<line x1="${tenths(x1)}" y1="${tenths(y1)}" x2="${tenths(x2)}" y2="${tenths(y2)}" stroke="${colours.hairline}"/>`;
const text = ({ x, y, of, style }: { x: number; y: number; of: string; style: string }) =>
  `<text x="${tenths(x)}" y="${tenths(y)}" ${style}>${of}</text>`;
const label = (x: number, y: number, value: number, anchor: string) =>
  text({ x, y, of: value.toLocaleString("en-GB"), style: `text-anchor="${anchor}" fill="${colours.muted}"` });
