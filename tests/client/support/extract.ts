import type { Extract } from "@shared/contract/extracts";

/** An extract of sales whose check has ended; a test says what is different about its own. */
export const extractWith = (part: Partial<Extract> = {}): Extract => ({
  id: "0b7e3a44-3b1b-4a8e-9a0a-000000000001",
  kind: "sales",
  fileName: "week 24.csv",
  sizeBytes: 100,
  sha256: "0",
  state: "checked",
  rows: { read: 10, usable: 10, errors: 0, warnings: 0 },
  firstWeek: "2026-06-08",
  lastWeek: "2026-06-08",
  uploadedBy: { id: "0b7e3a44-3b1b-4a8e-9a0a-000000000002", name: "Ada Kale" },
  uploadedAt: "2026-06-15T08:00:00.000Z",
  checkedAt: "2026-06-15T08:00:01.000Z",
  loadedAt: null,
  withdrawnAt: null,
  jobId: null,
  layout: { origin: "own", id: null, name: null, isConfirmed: true },
  failure: null,
  may: { check: true, load: true, withdraw: false },
  ...part,
});

/** Who is signed in, with what they may do. */
export const sessionWith = (permissions: string[]) => ({
  person: { id: "0b7e3a44-3b1b-4a8e-9a0a-000000000002", name: "Ada Kale", email: "ada@larkmoor.example", roles: ["data-admin"], categories: [], mustChangePassword: false },
  permissions,
  by: "session",
});
