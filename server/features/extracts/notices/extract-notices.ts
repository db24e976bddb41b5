import type { EntityManager } from "@mikro-orm/postgresql";
import type { ExtractChanges } from "@shared/contract/extracts";
import type { Role } from "@shared/contract/permissions";
import type { Services } from "../../../services";
import { personName } from "../../accounts";
import { getChain } from "../../chain";
import { addressOf, sendNotice } from "../../notices";
import type { Extract } from "../extracts.entities";
import { awaitsLayout } from "../extracts.policy";
import { letterOfCheck, letterOfLoad, writingOf } from "./letters";

/** Who plans with the sales, and who brings them. */
const readersOfSales: Role[] = ["data-admin", "planner", "category-manager"];
const keepersOfData: Role[] = ["data-admin"];

/**
 * Tells who uploaded a file, and the data admins, that its check found errors, or that someone must confirm how it is read
 * (a script's file would wait for ever); in the transaction in which the check ends.
 * Once a file: who checks it again sees the outcome.
 */
export async function noticeChecked(em: EntityManager, services: Services, extract: Extract): Promise<void> {
  const isProposal = awaitsLayout(extract);
  const hasErrors = extract.state === "unusable" || (extract.errorCount ?? 0) > 0;
  if (!hasErrors && !isProposal) return;
  const { rowsRead, rowsUsable, errorCount, failure } = extract;
  const letter = letterOfCheck({
    fileName: extract.fileName, kind: extract.kind, uploadedAt: extract.uploadedAt,
    uploadedBy: await personName(em, extract.uploadedBy.id),
    rows: rowsRead == null ? null : { read: rowsRead, usable: rowsUsable ?? 0, errors: errorCount ?? 0 },
    failure: failure?.detail ?? null,
    reasons: extract.issueCounts ?? [],
    isProposal,
    address: pageOf(services, extract),
  }, writingOf(await getChain(em)));
  const to = { roles: keepersOfData, personId: extract.uploadedBy.id };
  await sendNotice(em, services, { notice: "extract-has-errors", about: extract.id, to, letter });
}

type Load = { extract: Extract; changes: ExtractChanges; by: { personId: string; tokenId?: string | null } };

/**
 * Tells those who plan with the sales, and the data admins, that a file is loaded; in the transaction in which it is. What
 * brought nothing new, and files of the catalogue, are the data admins' business alone.
 */
export async function noticeLoaded(em: EntityManager, services: Services, { extract, changes, by }: Load): Promise<void> {
  const name = await personName(em, by.personId);
  const letter = letterOfLoad({
    fileName: extract.fileName, kind: extract.kind, changes,
    loadedBy: by.tokenId == null ? name : `A script with an access token of ${name}`,
    address: pageOf(services, extract),
    driversAddress: addressOf(services.environment, "/drivers"),
  }, writingOf(await getChain(em)));
  const isNews = extract.kind === "sales" && changes.totals.new + changes.totals.changed > 0;
  await sendNotice(em, services, { notice: "extract-loaded", about: extract.id, to: { roles: isNews ? readersOfSales : keepersOfData }, letter });
}

const pageOf = ({ environment }: Services, { id }: Extract) => addressOf(environment, `/extracts/${id}`);
