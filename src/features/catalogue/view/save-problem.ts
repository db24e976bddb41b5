import { ApiError } from "@/lib/api-error";

export type SaveProblem = {
  /** At the fields the server names, as the form knows them. */
  atFields: { field: string; message: string }[];
  /** What cannot be said at a field. */
  sentence: string | null;
  /** Someone was quicker: what is there now has been asked for. */
  isOutdated: boolean;
};

/** What a refused change says, and where. A list's field is named by its list: "stores.3" is of "stores". */
export const saveProblem = (error: unknown, fields: readonly string[]): SaveProblem => {
  if (!(error instanceof ApiError)) return { atFields: [], sentence: "It was not saved. Try again.", isOutdated: false };
  const fieldOf = (path: string) => fields.find((field) => path === field || path.startsWith(`${field}.`));
  const atFields = error.errors.flatMap(({ path, message }) => {
    const field = fields.find((name) => name === path) ?? fieldOf(path);
    return field === undefined ? [] : [{ field, message }];
  });
  return { atFields, sentence: atFields.length > 0 ? null : error.detail, isOutdated: error.status === 412 };
};
