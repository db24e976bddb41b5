import * as contract from "@shared/contract/accounts";
import { permissionsOf } from "@shared/contract/permissions";
import { publicRoute, route, type Route } from "../../http/route";
import { presentSession, presentToken } from "./accounts.presenter";
import { noteSignOut, personSigningIn, replacePassword } from "./credentials.service";
import { getPerson } from "./people.service";
import { beginSession, endSession } from "./sessions";
import { requireSession } from "./tokens.policy";
import { makeToken, ownTokens, revokeToken } from "./tokens.service";

const signIn = publicRoute(
  contract.signIn,
  async ({ body, em, services, request, requestId, now }) => {
    const person = await personSigningIn(em, services, { ...body, from: request.ip ?? "unknown", requestId });
    await beginSession(request, person, now);
    return presentSession(person, new Set(permissionsOf(person.roles)), "session");
  },
  { throttle: "sign-in" },
);

const readSession = route(contract.getSession, async ({ em, caller }) => {
  const person = await getPerson(em, caller.personId);
  return presentSession(person, caller.permissions, caller.tokenId === null ? "session" : "token");
});

const signOut = publicRoute(contract.signOut, async ({ em, request, requestId }) => {
  const { personId } = request.session;
  if (!personId) return undefined;
  await endSession(request);
  await noteSignOut(em, personId, requestId);
  return undefined;
});

const changePassword = route(
  contract.changePassword,
  async ({ body, em, services, caller, request, requestId, now }) => {
    requireSession(caller);
    const change = { ...body, personId: caller.personId, from: request.ip ?? "unknown", requestId };
    const person = await replacePassword(em, services, change);
    // Every session of the old password has ended, this one too: the person goes on in a new one.
    await beginSession(request, person, now);
    return undefined;
  },
  { throttle: "sign-in" },
);

const createToken = route(contract.createToken, async ({ body, em, caller, requestId, now }) => {
  const { row, token } = await makeToken(em, body, { caller, requestId, now });
  return { ...presentToken(row), token };
});

const listTokens = route(contract.listTokens, async ({ em, caller }) => {
  const rows = await ownTokens(em, caller.personId);
  return { items: rows.map(presentToken) };
});

const deleteToken = route(contract.revokeToken, async ({ params, em, caller, requestId, now }) => {
  await revokeToken(em, params.id, { caller, requestId, now });
  return undefined;
});

export const accountsRoutes: readonly Route[] = [
  signIn,
  readSession,
  signOut,
  changePassword,
  createToken,
  listTokens,
  deleteToken,
];
