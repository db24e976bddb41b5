import type * as contract from "@shared/contract/extracts";
import type { Caller } from "../../http/route";
import type { Extract } from "./extracts.entities";
import { extractRights } from "./extracts.policy";

/** An extract with its `uploadedBy` loaded. */
export function presentExtract(extract: Extract, caller: Pick<Caller, "permissions">): contract.Extract {
  const { id, kind, fileName, sizeBytes, sha256, state } = extract;
  return {
    id, kind, fileName, sizeBytes, sha256, state,
    rows: rowsOf(extract),
    firstWeek: extract.firstWeek ?? null,
    lastWeek: extract.lastWeek ?? null,
    uploadedBy: { id: extract.uploadedBy.id, name: extract.uploadedBy.name },
    uploadedAt: extract.uploadedAt.toISOString(),
    checkedAt: extract.checkedAt?.toISOString() ?? null,
    loadedAt: extract.loadedAt?.toISOString() ?? null,
    withdrawnAt: extract.withdrawnAt?.toISOString() ?? null,
    jobId: extract.jobId ?? null,
    layout: layoutOf(extract),
    failure: extract.failure ?? null,
    may: extractRights(extract, caller),
  };
}

function layoutOf({ layoutOrigin, savedLayout, layoutConfirmed }: Extract): contract.Extract["layout"] {
  if (layoutOrigin == null) return null;
  return { origin: layoutOrigin, id: savedLayout?.id ?? null, name: savedLayout?.name ?? null, isConfirmed: layoutConfirmed };
}

function rowsOf({ rowsRead, rowsUsable, errorCount, warningCount }: Extract): contract.Extract["rows"] {
  if (rowsRead == null) return null;
  return { read: rowsRead, usable: rowsUsable ?? 0, errors: errorCount ?? 0, warnings: warningCount ?? 0 };
}
