import type { EntityManager } from "@mikro-orm/postgresql";
import type { Layout } from "@shared/contract/layouts";
import type { ExtractLayout, LayoutPreview } from "@shared/contract/saved-layouts";
import { detectLayout } from "@shared/layouts";
import { conflict, notFound, ProblemError, unusable } from "../../../errors";
import type { Services } from "../../../services";
import { audit } from "../../accounts";
import { calendarOf, getChain } from "../../chain";
import type { Extract } from "../extracts.entities";
import { layoutInForceOf, lockExtract } from "../extracts.repository";
import { getExtract } from "../extracts.service";
import type { Actor } from "../load/load-extract.service";
import { UnreadableFile } from "../read/unreadable-file";
import { enqueueCheck } from "../requests.service";
import { ownLayoutOf } from "./choose-layout";
import { previewLayout } from "./preview-layout";
import { readFileHead } from "./read-file-head";
import { requireComplete, saveLayoutAs } from "./saved-layouts.service";
import { chooseFor } from "./settle-layout.service";

/**
 * How an extract's file is read, with its first rows: by the layout in force, or, before its first check, by the one that the
 * check would take.
 *
 * @throws ProblemError 404; 409 where the file can be read by no layout; 503 where the file store does not give it out.
 */
export async function getExtractLayout(em: EntityManager, { services, extractId }: { services: Services; extractId: string }): Promise<ExtractLayout> {
  const extract = await getExtract(em, extractId);
  const head = await headOf(services, extract);
  const { layout, ...how } = await inForce(em, { services, extract, head });
  const preview = await previewLayout(head, { layout, calendar: calendarOf(await getChain(em)) });
  // Once a person has looked at it, what was a guess is none any more.
  return { layout, ...how, preview: how.isConfirmed ? { ...preview, warnings: preview.warnings.filter(({ code }) => !guesses.has(code)) } : preview };
}

const guesses = new Set([
  "dates-ambiguous", "numbers-ambiguous", "week-day-ambiguous", "tax-guessed", "encoding-guessed", "separator-ambiguous", "header-ambiguous",
  "separator-line", "lines-above-header", "column-not-found", "values-do-not-fit",
]);

type InForce = Omit<ExtractLayout, "preview">;

async function inForce(em: EntityManager, { services, extract, head }: { services: Services; extract: Extract; head: Uint8Array }): Promise<InForce> {
  const { layoutOrigin, savedLayout, layoutConfirmed } = extract;
  const kept = await layoutInForceOf(em, extract);
  const own = layoutOrigin === "own" ? ownLayoutOf(head, extract.kind) : null;
  const layout = kept ?? own;
  if (layoutOrigin != null && layout) {
    return { layout, origin: layoutOrigin, saved: savedLayout ? { id: savedLayout.id, name: savedLayout.name } : null, isConfirmed: layoutConfirmed };
  }
  const { choice, saved } = await orConflict(() => chooseFor(services, { extract, head }));
  return { layout: choice.layout, origin: choice.origin, saved: saved && { id: saved.id, name: saved.name }, isConfirmed: choice.origin !== "proposed" };
}

type Trial = { services: Services; extractId: string; layout: Layout };

/** The file's first rows as another layout would read them. @throws ProblemError as `getExtractLayout`, and 422 for a layout of another kind. */
export async function previewExtractLayout(em: EntityManager, { services, extractId, layout }: Trial): Promise<LayoutPreview> {
  const extract = await getExtract(em, extractId);
  requireKind(extract, layout);
  return previewLayout(await headOf(services, extract), { layout, calendar: calendarOf(await getChain(em)) });
}

type Choosing = Trial & { saveAs?: string; actor: Actor };

/**
 * Has an extract's file read by a layout from now on, kept for its source where it is given a name, and checked again.
 *
 * @returns the job of the check.
 * @throws ProblemError 404; 409 while it is checked, or once it is being loaded or was; 422 where the layout is for another kind
 * of file or lacks needed columns.
 */
export async function putExtractLayout(em: EntityManager, { services, extractId, layout, saveAs, actor }: Choosing): Promise<string> {
  const extract = await getExtract(em, extractId);
  requireSettable(extract);
  requireKind(extract, layout);
  requireComplete(layout);
  const complete = withTheirColumns(layout, await headOf(services, extract));
  return em.transactional(async (inner) => {
    const locked = await lockExtract(inner, extractId);
    if (!locked) throw notFound("extract");
    requireSettable(locked);
    await layoutInForceOf(inner, locked);
    const saved = saveAs === undefined ? null : await saveLayoutAs(inner, { name: saveAs, layout: complete, actor, now: services.now() });
    inner.assign(locked, { layoutOrigin: saved ? "saved" : "chosen", layoutInForce: complete, savedLayout: saved, layoutConfirmed: true }, { mergeObjectProperties: false });
    // What was found by another layout counts no more: until the new check has ended there is nothing to load.
    Object.assign(locked, { state: "received", failure: null, rowsRead: null, rowsUsable: null, errorCount: null, warningCount: null, checkedAt: null } satisfies Partial<Extract>);
    audit(inner, { ...actor, action: "extract.layout-chosen", subject: { kind: "extract", id: extractId }, detail: { fileName: locked.fileName, savedAs: saveAs ?? null, layout: complete } });
    return enqueueCheck(inner, { services, extract: locked, personId: actor.personId });
  });
}

/** Columns are known again by the header of the file itself, whatever the caller took it for. */
function withTheirColumns(layout: Layout, head: Uint8Array): Layout {
  const { kind, encoding, separator, linesAbove, hasHeader } = layout;
  const { theirColumns } = detectLayout(head, kind, { given: { encoding, separator, linesAbove, hasHeader } }).layout;
  return { ...layout, theirColumns };
}

function requireKind({ kind }: Extract, layout: Layout): void {
  if (layout.kind === kind) return;
  const detail = `The layout is for a ${layout.kind} file, and this is a ${kind} file.`;
  throw unusable("layout-of-another-kind", detail, [{ path: "layout.kind", message: detail }]);
}

function requireSettable({ state }: Extract): void {
  if (state === "received" || state === "checked" || state === "unusable") return;
  const words = state === "checking" || state === "loading" ? `being ${state === "checking" ? "checked" : "loaded"} just now` : `${state} already`;
  const instead = state === "checking" ? "Wait for the check to end." : "Upload the file anew to read it otherwise.";
  throw conflict("layout-fixed", `This extract is ${words}: how it is read cannot be changed. ${instead}`);
}

async function headOf({ files, logger }: Services, { id, storageKey }: Extract): Promise<Buffer> {
  try {
    return await orConflict(() => readFileHead(files, storageKey));
  } catch (error) {
    if (error instanceof ProblemError) throw error;
    logger.error({ err: error, extract: id }, "the beginning of an original could not be read");
    throw new ProblemError({ status: 503, code: "file-store-unavailable", detail: "The file cannot be read just now. Try again in a minute." });
  }
}

/** A file that no layout can read has a state of its own; here its reason is the answer. */
async function orConflict<Value>(read: () => Promise<Value>): Promise<Value> {
  try {
    return await read();
  } catch (error) {
    throw error instanceof UnreadableFile ? conflict(error.code, error.message) : error;
  }
}
