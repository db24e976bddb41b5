import { z } from "zod";
import { idParams, idSchema, pageOf, pageQuery, personReferenceSchema, timestampSchema, weekSchema } from "./common";
import { defineEndpoint } from "./endpoint";
import { extractKindSchema } from "./extract-kinds";
import { acceptedSchema } from "./jobs";

/**
 * received -> checking -> checked | unusable; checked -> loading -> loaded -> withdrawn.
 * A check or load that broke down returns to the state before it, with the reason in `failure`: to "received" and to
 * "checked". A file that is received, checked or unusable can be checked again, for example once missing stores are there.
 */
export const extractStateSchema = z.enum(["received", "checking", "checked", "unusable", "loading", "loaded", "withdrawn"]);

export const extractSchema = z.object({
  id: idSchema,
  kind: extractKindSchema,
  fileName: z.string(),
  sizeBytes: z.number(),
  /** SHA-256 of the file as it arrived, in hexadecimal. */
  sha256: z.string(),
  state: extractStateSchema,
  /** Rows of the file, those of them that a load takes, and how many errors and warnings were found in them. */
  rows: z.object({ read: z.number(), usable: z.number(), errors: z.number(), warnings: z.number() }).nullable(),
  firstWeek: weekSchema.nullable(),
  lastWeek: weekSchema.nullable(),
  uploadedBy: personReferenceSchema,
  uploadedAt: timestampSchema,
  checkedAt: timestampSchema.nullable(),
  loadedAt: timestampSchema.nullable(),
  withdrawnAt: timestampSchema.nullable(),
  /** The job that works on it now, or worked on it last. */
  jobId: idSchema.nullable(),
  /**
   * How the file is read. "own": it is in our own form; "saved": by a layout saved for its source; "chosen": as a person
   * set it for this file; "proposed": as we worked it out ourselves, which a person must confirm before it is loaded.
   * Null until the first check.
   */
  layout: z.object({
    origin: z.enum(["own", "saved", "chosen", "proposed"]), id: idSchema.nullable(), name: z.string().nullable(), isConfirmed: z.boolean(),
  }).nullable(),
  /** Why the file cannot be used at all, or why the last job broke down. */
  failure: z.object({ code: z.string(), detail: z.string() }).nullable(),
  /** What the reader may do next. */
  may: z.object({ check: z.boolean(), load: z.boolean(), withdraw: z.boolean() }),
});
export type Extract = z.infer<typeof extractSchema>;

export const extractIssueSchema = z.object({
  /** Line in the file, the header being line 1. */
  line: z.number().int(),
  column: z.string(),
  value: z.string(),
  severity: z.enum(["error", "warning"]),
  /** Stable name of the rule, for example "unknown-store". */
  rule: z.string(),
  reason: z.string(),
  remedy: z.string(),
});
export type ExtractIssue = z.infer<typeof extractIssueSchema>;

/** How often each rule was broken. `count` is exact; of a rule that is broken very often only the first are `listed` as issues. */
export const issueCountSchema = z.object({
  rule: z.string(),
  severity: z.enum(["error", "warning"]),
  reason: z.string(),
  remedy: z.string(),
  count: z.number(),
  listed: z.number(),
});
export type IssueCount = z.infer<typeof issueCountSchema>;

/** What the list of issues can be narrowed to. `column` is one of the file as issues name it; empty for the whole row. */
const issueFilter = z.object({
  severity: z.enum(["error", "warning"]).optional(), rule: z.string().max(60).optional(), column: z.string().max(80).optional(),
});

/** Everything that a file is checked for. An error keeps its row out; a warning does not. */
export const checkRuleSchema = z.object({
  rule: z.string(), severity: z.enum(["error", "warning"]),
  /** What kind of fault it is; rules of one kind follow each other. */
  about: z.string(),
  reason: z.string(), remedy: z.string(),
});
export type CheckRule = z.infer<typeof checkRuleSchema>;

/**
 * Rows that loading adds, changes or leaves as they are; `weeks` has those of sales, and is empty for other kinds. Missing
 * are rows of the file's weeks and of the stores it names that are loaded already and that the file does not have: they stay.
 */
export const extractChangesSchema = z.object({
  totals: z.object({ new: z.number(), changed: z.number(), same: z.number(), missing: z.number() }),
  weeks: z.array(z.object({
    week: weekSchema, new: z.number(), changed: z.number(), same: z.number(), missing: z.number(),
    /** Units of the file's rows as they stand in the database, and as the file has them. */
    unitsBefore: z.number(), unitsAfter: z.number(),
  })),
  /** Why the load must be confirmed in so many words, by the chain's threshold; empty where it need not be. */
  secondLook: z.array(z.string()),
});
export type ExtractChanges = z.infer<typeof extractChangesSchema>;

/** Which weeks of sales are loaded and which are not, by the chain's weeks and today's date where the chain is. */
export const loadedWeeksSchema = z.object({
  first: weekSchema.nullable(),
  last: weekSchema.nullable(),
  /** Weeks between the first and the last of which nothing is loaded, oldest first; of the newest twenty years. */
  missing: z.array(weekSchema),
  /** The week after the last; null where nothing is loaded. */
  expected: weekSchema.nullable(),
  /** How many weeks after the last have ended; the one expected is the first of them. */
  overdue: z.number().int(),
});
export type LoadedWeeks = z.infer<typeof loadedWeeksSchema>;

export const getLoadedWeeks = defineEndpoint({
  method: "GET", path: "/api/loaded-weeks", summary: "Which weeks of sales are loaded, missing and expected next", permission: "read",
  response: loadedWeeksSchema,
});
export const listExtracts = defineEndpoint({
  method: "GET", path: "/api/extracts", summary: "Extracts, newest first", permission: "read", query: pageQuery, response: pageOf(extractSchema),
});
export const uploadExtract = defineEndpoint({
  method: "POST", path: "/api/extracts", summary: "Upload a file; it is kept unchanged and checked in the background", permission: "extracts:write",
  multipart: true,
  body: z.object({ kind: extractKindSchema, layout: z.string().max(80).optional().describe("Name of the saved layout to read the file by; else its first rows tell how.") }),
  response: extractSchema, status: 202,
});
export const getExtract = defineEndpoint({
  method: "GET", path: "/api/extracts/:id", summary: "One extract", permission: "read", params: idParams, response: extractSchema,
});
export const listExtractIssues = defineEndpoint({
  method: "GET", path: "/api/extracts/:id/issues", summary: "Rows that cannot be used, or look odd", permission: "read",
  params: idParams, query: pageQuery.extend(issueFilter.shape),
  response: pageOf(extractIssueSchema).extend({ byRule: z.array(issueCountSchema) }),
});
export const getExtractIssuesCsv = defineEndpoint({
  method: "GET", path: "/api/extracts/:id/issues.csv", summary: "The same as CSV, for those who keep the system the file comes from", permission: "read",
  params: idParams, query: issueFilter, produces: "text/csv",
});
export const listCheckRules = defineEndpoint({
  method: "GET", path: "/api/check-rules", summary: "What a file is checked for", permission: "read", response: z.object({ items: z.array(checkRuleSchema) }),
});
export const getExtractChanges = defineEndpoint({
  method: "GET", path: "/api/extracts/:id/changes", summary: "What loading would change, or changed", permission: "read",
  params: idParams, response: extractChangesSchema,
});
export const getExtractOriginal = defineEndpoint({
  method: "GET", path: "/api/extracts/:id/original", summary: "The file as it arrived, byte for byte", permission: "read",
  params: idParams, produces: "application/octet-stream",
});
export const checkExtract = defineEndpoint({
  method: "POST", path: "/api/extracts/:id/check", summary: "Check the file again, against what is in the catalogue by now",
  permission: "extracts:write", params: idParams, response: acceptedSchema, status: 202,
});
export const loadExtract = defineEndpoint({
  method: "POST", path: "/api/extracts/:id/load", summary: "Load all usable rows, or none", permission: "extracts:write",
  params: idParams,
  /** `secondLook`: the caller has looked at what is unusual about it; needed where the changes ask for it. */
  body: z.object({ secondLook: z.boolean().default(false) }).optional(),
  response: acceptedSchema, status: 202,
});
export const withdrawExtract = defineEndpoint({
  method: "POST", path: "/api/extracts/:id/withdraw", summary: "Put back what was there before this extract was loaded", permission: "extracts:write",
  params: idParams, response: acceptedSchema, status: 202,
});
