import { defineEntity, p, type InferEntity } from "@mikro-orm/core";
import { randomUUID } from "node:crypto";
import type { ExtractChanges, ExtractKind, IssueCount } from "@shared/contract/extracts";
import { PersonEntity } from "../accounts";

export type ExtractState = "received" | "checking" | "checked" | "unusable" | "loading" | "loaded" | "withdrawn";

export const ExtractEntity = defineEntity({
  name: "Extract",
  tableName: "extracts",
  indexes: [{ properties: ["uploadedAt"] }],
  properties: {
    id: p.uuid().primary().onCreate(() => randomUUID()),
    kind: p.string().length(20).$type<ExtractKind>(),
    fileName: p.string().length(255),
    sizeBytes: p.bigint("number"),
    sha256: p.string().length(64),
    storageKey: p.string().length(200),
    layout: p.string().length(80).nullable(),
    state: p.string().length(12).$type<ExtractState>().default("received"),
    rowsRead: p.integer().nullable(),
    rowsUsable: p.integer().nullable(),
    errorCount: p.integer().nullable(),
    warningCount: p.integer().nullable(),
    /** How often each rule was broken: exact, though only the first issues are kept. */
    issueCounts: p.json<IssueCount[]>().nullable().lazy(true, false),
    firstWeek: p.date().nullable(),
    lastWeek: p.date().nullable(),
    changes: p.json<ExtractChanges>().nullable().lazy(true, false),
    failure: p.json<{ code: string; detail: string }>().nullable(),
    jobId: p.uuid().nullable(),
    uploadedBy: () => p.manyToOne(PersonEntity),
    uploadedAt: p.datetime().onCreate(() => new Date()),
    checkedAt: p.datetime().nullable(),
    loadedAt: p.datetime().nullable(),
    withdrawnAt: p.datetime().nullable(),
  },
});
export type Extract = InferEntity<typeof ExtractEntity>;

/** Written in bulk by the check, read a page at a time. */
export const ExtractIssueEntity = defineEntity({
  name: "ExtractIssue",
  tableName: "extract_issues",
  indexes: [{ properties: ["extract", "line", "id"] }],
  properties: {
    id: p.bigint("number").primary().autoincrement(),
    extract: () => p.manyToOne(ExtractEntity).deleteRule("cascade"),
    line: p.integer(),
    column: p.string().fieldName("column_name").length(80),
    value: p.string().length(200),
    severity: p.string().length(8).$type<"error" | "warning">(),
    rule: p.string().length(60),
    reason: p.string().length(400),
    remedy: p.string().length(400),
  },
});
export type ExtractIssue = InferEntity<typeof ExtractIssueEntity>;
