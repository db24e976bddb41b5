import type { Chain } from "@shared/contract/chain";
import { ApiError } from "@/lib/api-error";

type FieldProblem = { field: keyof Chain; message: string };

/** What the server found wrong, at the fields it names, and one sentence where it names none. */
export const settingsProblem = (error: unknown, fields: readonly string[]): { atFields: FieldProblem[]; sentence: string | null } => {
  if (!(error instanceof ApiError)) return { atFields: [], sentence: "The settings were not saved. Try again." };
  const atFields = error.errors.flatMap(({ path, message }) => (fields.includes(path) ? [{ field: path as keyof Chain, message }] : []));
  return { atFields, sentence: atFields.length > 0 ? null : error.detail };
};
