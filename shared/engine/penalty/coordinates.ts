/**
 * From the coordinates a term is fitted in to the coefficients of its raw columns.
 * scaled: coefficient = factor x coordinate. without: the raw column `leftOut` has coefficient zero. dense: coefficients =
 * matrix x coordinates. blocks: the same dense matrix (rows x columns) for each of `count` levels; a level's first
 * `unpenalised` coordinates stand among the term's unpenalised ones, level by level, the others among its penalised ones.
 */
export type TermTransform =
  | { form: "scaled"; factor: number }
  | { form: "without"; leftOut: number }
  | { form: "dense"; matrix: Float64Array }
  | { form: "blocks"; matrix: Float64Array; rows: number; columns: number; count: number; unpenalised: number };

/** One penalty: its diagonal over the term's penalised coordinates `start` to `end` (all ones where null). */
export type PenaltyShape = { start: number; end: number; diagonal: Float64Array | null };

/**
 * Fitting coordinates of a term: the unpenalised come first, then those under diagonal penalties.
 * For a term on groups (`grouped`) transform is blocks without unpenalised coordinates, `penalties` cover one group's
 * coordinates and hold for every group alike.
 */
export type TermCoordinates = {
  transform: TermTransform;
  rawWidth: number;
  unpenalised: number;
  penalised: number;
  penalties: PenaltyShape[];
  grouped: boolean;
};

/** Coordinates without penalties. */
export const unpenalisedCoordinates = (transform: TermTransform, rawWidth: number, unpenalised: number): TermCoordinates =>
  ({ transform, rawWidth, unpenalised, penalised: 0, penalties: [], grouped: false });

/** Coordinates of which all but the first `unpenalised` are under one penalty, the identity. */
export const ridgeCoordinates = (
  transform: TermTransform, rawWidth: number, counts: { unpenalised: number; penalised: number },
): TermCoordinates => ({
  transform, rawWidth, ...counts, penalties: [{ start: 0, end: counts.penalised, diagonal: null }], grouped: false,
});
