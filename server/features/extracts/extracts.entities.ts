import { defineEntity, p, type InferEntity } from "@mikro-orm/core";
import { randomUUID } from "node:crypto";
import type { ExtractKind } from "@shared/contract/extract-kinds";
import type { ExtractChanges, IssueCount } from "@shared/contract/extracts";
import type { Layout } from "@shared/contract/layouts";
import type { UnknownCodes } from "@shared/contract/unknown-codes";
import { PersonEntity } from "../accounts";

export type ExtractState = "received" | "checking" | "checked" | "unusable" | "loading" | "loaded" | "withdrawn";

export type LayoutOrigin = "own" | "saved" | "chosen" | "proposed";

/** How the files of a source are written, kept under a name. */
export const SavedLayoutEntity = defineEntity({
  name: "SavedLayout",
  tableName: "saved_layouts",
  properties: {
    id: p.uuid().primary().onCreate(() => randomUUID()),
    name: p.string().length(80).unique(),
    kind: p.string().length(20).$type<ExtractKind>(),
    layout: p.json<Layout>(),
    updatedBy: () => p.manyToOne(PersonEntity),
    updatedAt: p.datetime(),
    lastUsedAt: p.datetime().nullable(),
  },
});
export type SavedLayout = InferEntity<typeof SavedLayoutEntity>;

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
    /** Name of the saved layout that the upload asked for. */
    layout: p.string().length(80).nullable(),
    layoutOrigin: p.string().length(10).$type<LayoutOrigin>().nullable(),
    /** The layout by which the file is read; null while it is not known, and where it is in our own form. */
    layoutInForce: p.json<Layout>().nullable().lazy(true, false),
    savedLayout: () => p.manyToOne(SavedLayoutEntity).nullable().deleteRule("set null"),
    /** Whether a person has seen how the file is read, now or when the layout was saved. */
    layoutConfirmed: p.boolean().default(false),
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
    /** Which sales, and which threshold, they were worked out by; while these stay, they need not be worked out again. */
    changesAsOf: p.string().length(60).nullable(),
    /** Codes that the catalogue lacked when the file was checked. */
    unknownCodes: p.json<UnknownCodes>().nullable().lazy(true, false),
    /** Whether the picture of what is there has yet to count it in. */
    coveragePending: p.boolean().default(false),
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

/** What is loaded of a store in a week, kept in step by a job after each load and withdrawal. */
export const StoreWeekEntity = defineEntity({
  name: "StoreWeek",
  tableName: "store_weeks",
  indexes: [{ properties: ["week"] }],
  properties: {
    storeId: p.integer().primary(),
    week: p.date().primary(),
    /** None where what was loaded has been withdrawn. */
    rowCount: p.integer(),
    /** Whether a later file changed rows of an earlier one. */
    isRestated: p.boolean().default(false),
    /** The file loaded last, or withdrawn. */
    extract: () => p.manyToOne(ExtractEntity).nullable().deleteRule("set null"),
  },
});
export type StoreWeek = InferEntity<typeof StoreWeekEntity>;
