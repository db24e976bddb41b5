import * as contract from "@shared/contract/notices";
import { route, type Route } from "../../http/route";
import { presentChoices } from "./notices.presenter";
import { chooseNotices, getReader } from "./notices.service";

const read = route(contract.getNoticeChoices, async ({ em, caller }) => presentChoices(await getReader(em, caller.personId)));

const choose = route(contract.putNoticeChoices, async ({ em, body, caller, requestId }) =>
  presentChoices(await chooseNotices(em, body, { caller, requestId })));

export const noticesRoutes: readonly Route[] = [read, choose];
