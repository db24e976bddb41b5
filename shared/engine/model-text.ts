import { EngineError } from "./errors";
import type { FittedModel, ModelBand } from "./types";

/** Key under which a typed array's bytes are kept; a number JSON cannot hold exactly is kept as text under the other. */
const arrayKey = "$float64";
const numberKey = "$number";
const bands: readonly unknown[] = ["pointwise", "corrected", "averaged"] satisfies ModelBand[];
const oddNumbers: Record<string, number> = { "-0": -0, NaN: Number.NaN, Infinity, "-Infinity": -Infinity };

/**
 * A fitted model as JSON text. Arrays are kept as the bytes of their numbers (little-endian, base64), so nothing is rounded.
 *
 * @example const text = serialiseModel(model); // store it, send it
 */
export function serialiseModel(model: FittedModel): string {
  return JSON.stringify(model, (_key, value: unknown) => {
    if (value instanceof Float64Array) return { [arrayKey]: toBase64(value) };
    if (typeof value === "number" && (!Number.isFinite(value) || Object.is(value, -0))) {
      return { [numberKey]: Object.is(value, -0) ? "-0" : String(value) };
    }
    return value;
  });
}

/**
 * The model a text of `serialiseModel` holds, the same to the last bit. Texts from before models said which band their
 * covariance is of hold the one they were fitted with, "pointwise".
 *
 * @throws EngineError model-text-invalid for text that is no such model.
 * @example parseModel(serialiseModel(model)).coefficients; // as model.coefficients
 */
export function parseModel(text: string): FittedModel {
  let parsed: unknown;
  try {
    parsed = JSON.parse(text, (_key, value: unknown) => restore(value));
  } catch (error) {
    if (error instanceof EngineError) throw error;
    throw new EngineError("model-text-invalid", `The text is not a model: ${error instanceof Error ? error.message : String(error)}.`);
  }
  if (!isModel(parsed)) throw new EngineError("model-text-invalid", "The text is not a model of format 1.");
  return { ...parsed, band: parsed.band ?? "pointwise" };
}

function restore(value: unknown): unknown {
  if (typeof value !== "object" || value === null) return value;
  if (arrayKey in value && typeof value[arrayKey] === "string") return fromBase64(value[arrayKey]);
  if (numberKey in value && typeof value[numberKey] === "string") return oddNumbers[value[numberKey]];
  return value;
}

type StoredModel = Omit<FittedModel, "band"> & { band?: ModelBand };

function isModel(value: unknown): value is StoredModel {
  if (typeof value !== "object" || value === null) return false;
  const candidate = value as Partial<FittedModel>;
  const { band, coefficients, covariance, groupCovariance, terms } = candidate;
  const grouped = groupCovariance == null ? 0 : groupCovariance.count * groupCovariance.size;
  return candidate.format === 1
    && (band === undefined || bands.includes(band))
    && typeof candidate.spec === "object" && candidate.spec !== null
    && Array.isArray(terms)
    && Array.isArray(candidate.warnings)
    && candidate.fitted instanceof Float64Array
    && coefficients instanceof Float64Array
    && covariance instanceof Float64Array
    && covariance.length === ((coefficients.length - grouped) * (coefficients.length - grouped + 1)) / 2;
}

function toBase64(values: Float64Array): string {
  const view = new DataView(new ArrayBuffer(8 * values.length));
  for (let k = 0; k < values.length; k++) view.setFloat64(8 * k, values[k], true);
  const bytes = new Uint8Array(view.buffer);
  let binary = "";
  // In slices: a call takes a limited number of arguments.
  for (let at = 0; at < bytes.length; at += 8192) binary += String.fromCharCode(...bytes.subarray(at, at + 8192));
  return btoa(binary);
}

function fromBase64(text: string): Float64Array {
  const binary = atob(text);
  if (binary.length % 8 !== 0) throw new EngineError("model-text-invalid", "The text is not a model: an array is cut short.");
  const view = new DataView(new ArrayBuffer(binary.length));
  for (let at = 0; at < binary.length; at++) view.setUint8(at, binary.charCodeAt(at));
  return Float64Array.from({ length: binary.length / 8 }, (_, k) => view.getFloat64(8 * k, true));
}
