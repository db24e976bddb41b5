import { z } from "zod";

const problemSchema = z.object({
  title: z.string().optional(),
  status: z.number().optional(),
  detail: z.string().optional(),
  code: z.string().optional(),
  requestId: z.string().optional(),
  errors: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
});

export type FieldProblem = { path: string; message: string };

type ApiErrorParts = {
  status: number;
  code: string;
  detail: string;
  requestId?: string;
  errors?: FieldProblem[];
  retryAfterSeconds?: number;
};

/** What the server said went wrong (RFC 9457), or why it could not be asked: then status is 0. */
export class ApiError extends Error {
  readonly status: number;
  readonly code: string;
  readonly detail: string;
  readonly requestId?: string;
  readonly errors: FieldProblem[];
  readonly retryAfterSeconds?: number;

  constructor(parts: ApiErrorParts) {
    super(parts.detail);
    this.name = "ApiError";
    this.status = parts.status;
    this.code = parts.code;
    this.detail = parts.detail;
    this.requestId = parts.requestId;
    this.errors = parts.errors ?? [];
    this.retryAfterSeconds = parts.retryAfterSeconds;
  }
}

export const unreachable = () =>
  new ApiError({
    status: 0,
    code: "unreachable",
    detail: "The server did not answer. Check your connection, then try again.",
  });

type ProblemSource = { status: number; text: string; header: (name: string) => string | null };

/** Reads a refused answer; one that is not problem details still becomes a sentence a person can use. */
export const readProblem = ({ status, text, header }: ProblemSource): ApiError => {
  const parsed = problemSchema.safeParse(parseJson(text));
  const problem = parsed.success ? parsed.data : {};
  const retryAfter = Number(header("retry-after") ?? Number.NaN);
  return new ApiError({
    status,
    code: problem.code ?? `http-${status}`,
    detail: problem.detail ?? problem.title ?? "Something went wrong on our side. Nothing was changed.",
    requestId: problem.requestId ?? header("x-request-id") ?? undefined,
    errors: problem.errors,
    retryAfterSeconds: Number.isFinite(retryAfter) ? retryAfter : undefined,
  });
};

export const parseJson = (text: string): unknown => {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
};
