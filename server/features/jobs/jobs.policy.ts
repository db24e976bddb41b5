import { permissionSchema, type Permission } from "@shared/contract/permissions";
import type { Caller } from "../../http/route";
import type { JobRow } from "./jobs.entities";

const readOnly: readonly Permission[] = ["read", "audit:read"];

/** Whoever asked for a job, if they may change anything at all; and administrators. */
export function mayCancel(caller: Caller, job: JobRow): boolean {
  if (caller.permissions.has("people:manage")) return true;
  const changesThings = permissionSchema.options.some(
    (permission) => !readOnly.includes(permission) && caller.permissions.has(permission),
  );
  return changesThings && job.createdBy?.id === caller.personId;
}
