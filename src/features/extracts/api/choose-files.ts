import type { ExtractKind } from "@shared/contract/extract-kinds";
import { kindFromName } from "../view/extract-state";
import { fileProblem, sniffedBytes } from "../view/file-problem";
import type { ChosenFile } from "./upload-queue";

/** Looks at each file's beginning: whether it can be sent, and what it most likely holds. */
export const inspectFiles = (files: readonly File[], limitBytes: number | undefined): Promise<ChosenFile[]> =>
  Promise.all(
    files.map(async (file): Promise<ChosenFile> => {
      const head = new Uint8Array(await file.slice(0, sniffedBytes).arrayBuffer());
      const refusal = fileProblem({ size: file.size, head }, limitBytes);
      return { file, refusal, kind: refusal ? kindFromName(file.name) : await likelyKind(file.name, head) };
    }),
  );

/** By the columns where they tell, else by the name. A packed file keeps its columns to itself. */
const likelyKind = async (name: string, head: Uint8Array): Promise<ExtractKind> => {
  const { kindFromHead } = await import("../view/guess-kind");
  return kindFromHead(head) ?? kindFromName(name);
};
