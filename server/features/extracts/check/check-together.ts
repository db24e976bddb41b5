import type { KindDefinition } from "../kinds/kind";
import { analyseStaging, countStaged } from "../load/staging.repository";
import type { CheckNotes } from "./check-notes";
import { rejectRepeatedRows, type Together } from "./together.repository";

/** Holds an extract's staged rows to the rules over several of them. @returns how many can be used. */
export async function checkTogether({ definition, ...together }: Together & { definition: KindDefinition; notes: CheckNotes }): Promise<number> {
  await analyseStaging(together.em, together.table);
  await rejectRepeatedRows({ ...together, definition });
  await definition.checkTogether?.(together);
  return countStaged(together.em, together.extractId);
}
