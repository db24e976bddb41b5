import { bandModel, fitModel, parseModel, predict, serialiseModel } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { everyKind, everyKindRows, families, modelOf, withAuto } from "./support/every-kind-rows";

const rows = everyKindRows(13, 60);
const kinds = Object.entries(everyKind);
const grouped = serialiseModel(fitModel(modelOf("gaussian", everyKind["factor-smooth"]), rows));
const plain = serialiseModel(fitModel(modelOf("gaussian", everyKind.smooth), rows));
/** A text with one of its parts changed, or left out where it becomes undefined. */
const changed = (text: string, change: Record<string, unknown>) => JSON.stringify({ ...(JSON.parse(text) as object), ...change });
const bytes = (count: number) => ({ $float64: Buffer.from(new Float64Array(count).buffer).toString("base64") });

describe("Text that was a model once is refused where a part is missing or of another size:", () => {
  it.each<[string, string]>([
    ["no specification", changed(plain, { spec: null })],
    ["a specification in words", changed(plain, { spec: "gaussian" })],
    ["no terms", changed(plain, { terms: undefined })],
    ["terms by name", changed(plain, { terms: { price: 1 } })],
    ["no warnings", changed(plain, { warnings: undefined })],
    ["coefficients as a list", changed(plain, { coefficients: [1, 2, 3] })],
    ["one coefficient too few", changed(plain, { coefficients: bytes(7) })],
    ["a covariance cut short", changed(plain, { covariance: bytes(35) })],
    ["a covariance of one too many", changed(plain, { covariance: bytes(37) })],
    ["no fitted values", changed(plain, { fitted: undefined })],
    ["groups without their covariance", changed(grouped, { groupCovariance: null })],
    ["groups of no size", changed(grouped, { groupCovariance: {} })],
    ["a later format", changed(plain, { format: 2 })],
    ["a format in words", changed(plain, { format: "1" })],
    ["a band nobody knows", changed(plain, { band: "wide" })],
    ["a number", "17"],
    ["a word", '"model"'],
  ])("%s", (_name, text) => {
    expect(() => parseModel(text)).toThrow(expect.objectContaining({ name: "EngineError", code: "model-text-invalid", message: "The text is not a model of format 1." }) as Error);
  });

  it.each<[string, string, RegExp]>([
    ["bytes that are none", changed(plain, { fitted: { $float64: "?" } }), /^The text is not a model: /],
    ["half a number", changed(plain, { fitted: { $float64: "AAAAAA==" } }), /^The text is not a model: an array is cut short\.$/],
    ["half a text", plain.slice(0, 900), /^The text is not a model: /],
    ["another text behind", `${plain}{}`, /^The text is not a model: /],
  ])("%s", (_name, text, message) => {
    expect(() => parseModel(text)).toThrow(expect.objectContaining({ name: "EngineError", code: "model-text-invalid", message: expect.stringMatching(message) as string }) as Error);
  });
});

describe("Text of any model", () => {
  it.each(families.flatMap((family) => kinds.map(([name, terms]) => ({ family, name, terms }))))("reads back bit by bit, once and twice, and predicts the same: $family, $name", ({ family, terms }) => {
    const model = fitModel(modelOf(family, withAuto(terms)), rows);
    const text = serialiseModel(model);
    const read = parseModel(text);
    expect(serialiseModel(read)).toBe(text);
    expect(read).toEqual(model);
    expect(predict(parseModel(serialiseModel(read)), rows)).toEqual(predict(model, rows));
  });

  it("does not hang together with the model it was written from", () => {
    const model = fitModel(modelOf("gaussian", everyKind.smooth), rows);
    const read = parseModel(serialiseModel(model));
    read.coefficients[0] = 99;
    read.spec.terms.length = 0;
    expect(model.coefficients[0]).not.toBe(99);
    expect(model.spec.terms).toHaveLength(1);
  });

  it("keeps words of every alphabet, quotes and numbers for names", () => {
    const store = rows.store.map((name, row) => ["Zoë's", "9", "\"naïve\"", "北\u2028"][row % 4] + name.slice(0, 0));
    const data = { ...rows, store };
    const model = fitModel(modelOf("gaussian", everyKind["random effect"]), data);
    const read = parseModel(serialiseModel(model));
    expect(read.coefficientNames).toEqual(model.coefficientNames);
    expect(predict(read, data)).toEqual(predict(model, data));
  });

  it("from before models said which band they have is of the plain one", () => {
    const { band: _band, ...older } = JSON.parse(plain) as { band: string };
    expect(parseModel(JSON.stringify(older))).toEqual(parseModel(plain));
    expect(parseModel(JSON.stringify(older)).band).toBe("pointwise");
  });

  it.each(["pointwise", "corrected", "averaged"] as const)("says that its covariance is %s, and is not made so twice", (band) => {
    const model = bandModel(fitModel(modelOf("quasi-poisson", withAuto(everyKind.smooth)), rows), band);
    const read = parseModel(serialiseModel(model));
    expect(read.band).toBe(band);
    expect(bandModel(read, band)).toBe(read);
  });
});
