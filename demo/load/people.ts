import { createPerson, PersonEntity } from "../../server/features/accounts";
import { ensureChain } from "../../server/features/chain";
import type { Services } from "../../server/services";
import { chainSettings, demoPassword, type DemoPerson } from "../chain/people";

/** Sets the chain up with Larkmoor's settings, where it is not yet. */
export async function createChain({ orm }: Services): Promise<void> {
  await ensureChain(orm.em.fork(), chainSettings);
}

/** Creates a demo account, unless there is one with its address. */
export async function createAccount(
  { orm }: Services, { person, categories = [] }: { person: DemoPerson; categories?: string[] },
): Promise<void> {
  const em = orm.em.fork();
  const { email, name, roles } = person;
  if (await em.findOne(PersonEntity, { email })) return;
  await createPerson(em, { email, name, roles, categories, password: demoPassword });
}
