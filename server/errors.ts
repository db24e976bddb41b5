/** An error a caller can act on; the handler turns it into problem details (RFC 9457). */
export class ProblemError extends Error {
  readonly status: number;
  readonly code: string;
  readonly errors?: { path: string; message: string }[];
  /** Extra response headers, for example Retry-After. */
  readonly headers?: Record<string, string>;
  /** Whether it may be gone at the next try, so that a job is worth one. */
  readonly isPassing: boolean;

  constructor(problem: {
    status: number;
    /** Stable, kebab-case. */
    code: string;
    /** One sentence: what happened and what to do. */
    detail: string;
    errors?: { path: string; message: string }[];
    headers?: Record<string, string>;
    isPassing?: boolean;
  }) {
    super(problem.detail);
    this.name = "ProblemError";
    this.status = problem.status;
    this.code = problem.code;
    this.errors = problem.errors;
    this.headers = problem.headers;
    this.isPassing = problem.isPassing ?? false;
  }
}

export const notFound = (what: string) =>
  new ProblemError({ status: 404, code: "not-found", detail: `There is no such ${what}, or it was removed.` });

export const conflict = (code: string, detail: string) => new ProblemError({ status: 409, code, detail });

export const unusable = (code: string, detail: string, errors?: { path: string; message: string }[]) =>
  new ProblemError({ status: 422, code, detail, errors });
