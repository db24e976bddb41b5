import type { Family } from "@shared/engine";
import { describe, expect, it } from "vitest";
import { coverageStudy } from "./support/coverage-study";

/**
 * A short, seeded version of `npm run bench -- coverage`: 30 sets of each family, 1,872 rows each. A curve of about four degrees of
 * freedom is right or wrong in about four places independently, so a share p over 30 sets has a standard error of
 * sqrt(p (1 - p) / 120); limits are three of them beyond 93 %, and around 50 %, where bands too wide would show as well.
 */
const sets = 30;
const families: Family[] = ["gaussian", "log-gaussian", "quasi-poisson", "negative-binomial", "binomial"];
const error = (share: number) => Math.sqrt((share * (1 - share)) / (4 * sets));

describe.each(families)("Of simulated %s sales", (family) => {
  it("95 % bands hold the curves they were drawn from", () => {
    const { price, season, observation, residuals, converged } = coverageStudy(family, { sets, rows: 1872, seed: 77, shape: "threshold", level: 0.95 });
    for (const band of ["averaged", "with-mean, on its level"] as const) {
      expect(price[band], band).toBeGreaterThan(0.93 - 3 * error(0.93));
      expect(season[band], band).toBeGreaterThan(0.93 - 3 * error(0.93));
    }
    expect(converged).toBe(1);
    // New rows are thousands: the bar itself, 93 to 97.
    if (family === "binomial") expect(observation).toBe(null);
    else expect(Math.abs((observation ?? 0) - 0.95)).toBeLessThan(0.02);
    // At most three standard errors above the 5 % of sets that the test rejects of uniform ones.
    if (residuals !== null) expect(residuals.rejected).toBeLessThanOrEqual(0.05 + 3 * Math.sqrt((0.05 * 0.95) / sets));
    expect(residuals === null).toBe(family !== "quasi-poisson" && family !== "negative-binomial");
  });

  it("50 % bands hold half of them, and 50 % intervals half of new rows", () => {
    const { price, season, observation } = coverageStudy(family, { sets, rows: 1872, seed: 78, shape: "threshold", level: 0.5 });
    for (const held of [price, season]) expect(Math.abs(held["with-mean, on its level"] - 0.5)).toBeLessThan(3 * error(0.5));
    // A count's interval holds a little more, as it ends on whole numbers.
    if (family !== "binomial") expect(Math.abs((observation ?? 0) - 0.51)).toBeLessThan(0.03);
  });
});
