import { ProblemError } from "../../../errors";

/** What whoever enters something under a code is told that is taken; it names the field. */
export function codeTaken(what: string, code: string): ProblemError {
  const message = `There is a ${what} with the code ${code} already.`;
  return new ProblemError({ status: 409, code: "code-taken", detail: message, errors: [{ path: "code", message }] });
}
