import { packedIndex } from "../linalg/packed-symmetric";
import { termCoordinates } from "../penalty/term-transform";
import type { FittedModel, FittedTerm, LevelledSmoothBasis, ModelInformation } from "../types";

/** A coordinate of a level's curve: its column's mean over the level's rows, and where the level's own column stands. */
type Shift = { position: number; mean: number; level: { position: number; weight: number }[] };

/**
 * The information with curves per level centred over their level's rows, as they are in the model: fitting coordinates leave
 * their means in, which moves them to the factor beside them, so the factor's tests and shares would be of something else.
 * Column k becomes x_k - m_k (its level's indicator), and the factor's coordinates take up m_k b_k.
 *
 * @returns the information itself where the model has no curves per level; else a new one. O(size^2).
 * @example const information = withCentredLevels(model, model.information);
 */
export function withCentredLevels(model: FittedModel, information: ModelInformation): ModelInformation {
  const shifts = model.terms.flatMap((term) => shiftsOf(model, term)).filter(({ mean }) => mean !== 0);
  if (shifts.length === 0) return information;
  const { size, groups } = information;
  const shared = new Float64Array(information.shared);
  const coordinates = information.coordinates.slice();
  const cross = groups === null ? null : groups.cross.slice();
  for (const { position, mean, level } of shifts) {
    for (const { position: from, weight } of level) {
      addColumn(shared, { to: position, from, factor: -mean * weight, size });
      coordinates[from] += mean * weight * coordinates[position];
      for (let line = 0; cross !== null && line < cross.length; line += size) cross[line + position] -= mean * weight * cross[line + from];
    }
  }
  return { ...information, shared, coordinates, groups: groups === null || cross === null ? null : { ...groups, cross } };
}

/** Column `to` += factor x column `from`, and the rows likewise. */
function addColumn(packed: Float64Array, { to, from, factor, size }: { to: number; from: number; factor: number; size: number }): void {
  const meeting = packed[packedIndex(to, from)];
  const own = packed[packedIndex(from, from)];
  for (let k = 0; k < size; k++) if (k !== to) packed[packedIndex(to, k)] += factor * packed[packedIndex(from, k)];
  packed[packedIndex(to, to)] += factor * (2 * meeting + factor * own);
}

function shiftsOf(model: FittedModel, { basis, layout }: FittedTerm): Shift[] {
  if (basis.kind !== "levelled-smooth") return [];
  const { transform } = termCoordinates(basis);
  if (transform.form !== "blocks") return [];
  const { rows, columns, count, matrix, unpenalised: lines } = transform;
  return Array.from({ length: count * columns }, (_, at): Shift => {
    const level = Math.floor(at / columns);
    const column = at % columns;
    let mean = 0;
    for (let i = 0; i < rows; i++) mean += basis.centring[level * rows + i] * matrix[i * columns + column];
    const position = column < lines
      ? layout.unpenalisedFirst + level * lines + column
      : layout.penalisedFirst + level * (columns - lines) + (column - lines);
    return { position, mean, level: indicatorOf(model, basis, basis.levels[level]) };
  });
}

/** A level's indicator from the factor beside the curves: its own column, or the intercept less all others for the reference. */
function indicatorOf(model: FittedModel, basis: LevelledSmoothBasis, level: string): Shift["level"] {
  const factor = model.terms.find((term) => term.basis.kind === "factor" && term.basis.column === basis.by);
  if (factor?.basis.kind !== "factor") return [];
  const { levels, reference } = factor.basis;
  const columns = levels.filter((one) => one !== reference).map((one, k) => ({ one, position: factor.layout.unpenalisedFirst + k }));
  if (level !== reference) return columns.filter(({ one }) => one === level).map(({ position }) => ({ position, weight: 1 }));
  return [{ position: 0, weight: 1 }, ...columns.map(({ position }) => ({ position, weight: -1 }))];
}
