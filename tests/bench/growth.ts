import { growthLines, measureGrowth } from "./engine/growth";
import { saveGrowthPicture } from "./engine/growth-picture";

/** How a fit's time grows with rows, stores and terms; saves the picture that the README shows. `npm run bench -- growth [--json]` */
const growth = measureGrowth();
growthLines(growth).forEach((line) => console.log(line));
console.log(`Saved ${saveGrowthPicture(growth)}`);

const figures = Object.fromEntries(growth.flatMap(({ title, lines }) => lines.map(({ label, points }) => {
  const { size, ms } = points[points.length - 1];
  return [`${title}, ${label}, at ${size}`, { value: ms, limit: null, unit: "ms" }];
})));
if (process.argv.includes("--json")) console.log(JSON.stringify({ bench: "growth", ok: true, figures, growth }));
