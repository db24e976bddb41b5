import { createToken } from "@shared/contract/accounts";
import { answerOf, createApiClient, signedIn, type ApiClient } from "../../../../demo/load/api-client";
import { createOrm } from "../../../../server/database/orm";
import { createPerson } from "../../../../server/features/accounts";
import { ensureChain } from "../../../../server/features/chain";
import type { RunningApp } from "../../../support/running-app";

const account = { email: "script@chain.example", password: "a password for tests only" };

/**
 * The client of a script on an empty installation: a person with the roles it needs sets the day on which the chain's
 * weeks begin, and makes it an access token.
 */
export async function clientWithToken(app: RunningApp, { weekStart }: { weekStart: number }): Promise<ApiClient> {
  const orm = await createOrm({ DATABASE_URL: app.databaseUrl, DATABASE_POOL_SIZE: 2 });
  try {
    await ensureChain(orm.em.fork());
    const roles = ["administrator" as const, "data-admin" as const, "planner" as const];
    await createPerson(orm.em.fork(), { ...account, name: "Script", roles });
  } finally {
    await orm.close();
  }
  const person = await signedIn({ url: app.url, ...account });
  await person.call({ method: "PUT", path: "/api/chain", json: { weekStart } });
  const permissions = ["read", "extracts:write", "models:fit"];
  const wanted = { name: "orange juice", permissions };
  const { token } = answerOf(createToken, await person.call({ method: "POST", path: "/api/tokens", json: wanted }));
  return createApiClient({ url: app.url, headers: { authorization: `Bearer ${token}` } });
}
