import { Readable } from "node:stream";
import { pipeline } from "node:stream/promises";
import { byteOrderMark } from "@shared/csv";
import * as contract from "@shared/contract/extracts";
import { route, type Route } from "../../../http/route";
import { issuesCsvHeader, presentIssue, presentIssuesCsv, presentUnlisted } from "./issues.presenter";
import { listCheckRules, listIssues, readAllIssues } from "./issues.service";

const list = route(contract.listExtractIssues, async ({ em, params, query }) => {
  const { items, nextCursor, byRule } = await listIssues(em, params.id, query);
  return { items: items.map(presentIssue), nextCursor, byRule };
});

const readCsv = route(contract.getExtractIssuesCsv, async ({ em, params, query, request, response }) => {
  const { extract, pages, byRule } = await readAllIssues(em, params.id, query);
  async function* text() {
    yield byteOrderMark + issuesCsvHeader;
    for await (const issues of pages) yield presentIssuesCsv(issues);
    if (query.column === undefined) yield presentUnlisted(byRule);
  }
  response.attachment(`${extract.fileName.replace(/(\.csv)?(\.gz)?$/i, "")} issues.csv`).type("text/csv");
  response.set({ "X-Content-Type-Options": "nosniff", "Cache-Control": "private, no-store" });
  try {
    await pipeline(Readable.from(text()), response);
  } catch (error) {
    // Who asked for it has gone: that is no fault of ours.
    if (!request.destroyed) throw error;
  }
  return undefined;
});

const listRules = route(contract.listCheckRules, async () => ({ items: listCheckRules() }));

export const issuesRoutes: readonly Route[] = [list, readCsv, listRules];
