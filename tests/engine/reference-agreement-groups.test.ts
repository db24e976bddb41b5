import { describe, it } from "vitest";
import {
  expectCurvesAgreement, expectCurvesOfCountsAgreement, expectLevelsAgreement, expectSlopesAgreement, expectWalkAgreement,
} from "./support/agreement-groups";
import { committedReference } from "./support/reference-files";

// Normal: fitted 1e-5 of the standard deviation, degrees of freedom 1e-3, errors 1e-3. Counts: 1e-3, 0.02, 1e-2. See groups.R.
const reference = committedReference("groups");

describe("Terms on groups and over time agree with the reference package's", () => {
  it("a level per store", () => expectLevelsAgreement(reference));
  it("a level and a slope per store", () => expectSlopesAgreement(reference));
  it("a level that moves from week to week", () => expectWalkAgreement(reference));
  it("a curve per store around the chain's", () => expectCurvesAgreement(reference));
  it("a curve per store around the chain's, of counts", () => expectCurvesOfCountsAgreement(reference));
});
