import { pipeline } from "node:stream/promises";
import * as contract from "@shared/contract/extracts";
import { route, type Route } from "../../http/route";
import { accepted, actorOf } from "./accepted";
import { presentExtract } from "./extracts.presenter";
import { getChanges, getExtract, listExtracts, openOriginal, readLoadedWeeks } from "./extracts.service";
import { requestCheck, requestLoad, requestWithdrawal } from "./requests.service";
import { registerExtract } from "./upload/receive-extract.service";
import { receivedFile, receiveUpload } from "./upload/receive-upload";

const list = route(contract.listExtracts, async ({ em, query, caller }) => {
  const { items, nextCursor } = await listExtracts(em, query);
  return { items: items.map((extract) => presentExtract(extract, caller)), nextCursor };
});

const upload = route(contract.uploadExtract, async (call) => {
  const { em, services, body, request, response, caller } = call;
  const extract = await registerExtract(em, services, { file: receivedFile(request), ...body, actor: actorOf(call), inBackground: true });
  if (extract.jobId != null) accepted(response, extract.jobId);
  return presentExtract(extract, caller);
}, { throttle: "upload", before: [receiveUpload] });

const read = route(contract.getExtract, async ({ em, params, caller }) => presentExtract(await getExtract(em, params.id), caller));

const readChanges = route(contract.getExtractChanges, ({ em, params }) => getChanges(em, params.id));

const readWeeks = route(contract.getLoadedWeeks, ({ em, now }) => readLoadedWeeks(em, now));

const readOriginal = route(contract.getExtractOriginal, async (call) => {
  const { em, services, params, response } = call;
  const { extract, body } = await openOriginal(em, services, params.id);
  // The name decides nothing but the name: as any other type a browser might show what someone uploaded.
  response.attachment(extract.fileName).type("application/octet-stream");
  response.set({ "Content-Length": String(extract.sizeBytes), "X-Content-Type-Options": "nosniff", "Cache-Control": "private, no-store" });
  try {
    await pipeline(body, response);
  } catch (error) {
    // Who asked for it has gone: that is no fault of ours.
    if (!call.request.destroyed) throw error;
  }
  return undefined;
});

const check = route(contract.checkExtract, async (call) =>
  accepted(call.response, await requestCheck(call.em, { services: call.services, extractId: call.params.id, actor: actorOf(call) })));

const load = route(contract.loadExtract, async (call) =>
  accepted(call.response, await requestLoad(call.em, { services: call.services, extractId: call.params.id, actor: actorOf(call), ...call.body })));

const withdraw = route(contract.withdrawExtract, async (call) =>
  accepted(call.response, await requestWithdrawal(call.em, { services: call.services, extractId: call.params.id, actor: actorOf(call) })));

export const extractsRoutes: readonly Route[] = [list, upload, readWeeks, read, readChanges, readOriginal, check, load, withdraw];
