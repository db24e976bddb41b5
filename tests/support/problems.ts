import { expect } from "vitest";
import type { Response } from "supertest";
import { problemSchema } from "@shared/contract/common";

/** Expects problem details (RFC 9457) of this status and code, whole and with the request's id. */
export function expectProblem(response: Response, status: number, code: string): void {
  expect({ status: response.status, code: response.body.code }).toEqual({ status, code });
  expect(response.headers["content-type"]).toBe("application/problem+json; charset=utf-8");
  const problem = problemSchema.strict().parse(response.body);
  expect(problem).toMatchObject({
    status,
    type: `urn:shelftide:problem:${code}`,
    requestId: response.headers["x-request-id"],
  });
  expect(problem.detail).toMatch(/\.$/);
  expect(problem.title).not.toBe("");
}
