import type { Express } from "express";
import request from "supertest";
import { permissionsOf, type Permission, type Role } from "@shared/contract/permissions";
import { createPerson, type NewPerson } from "../../server/features/accounts";
import type { Services } from "../../server/services";

export const password = "a password for tests";

/** Creates a person with the test password; the address is made from the first role unless given. */
export async function addPerson(services: Services, person: Partial<NewPerson> & { roles: Role[] }) {
  const email = person.email ?? `${person.roles[0] ?? "nobody"}@chain.example`;
  const row = await createPerson(services.orm.em.fork(), { name: "Test Person", password, ...person, email });
  return { id: row.id, email };
}

/** A browser that is signed in: its requests carry the session's cookie. */
export async function signedIn(app: Express, email: string, withPassword = password) {
  const agent = request.agent(app);
  await agent.post("/api/session").send({ email, password: withPassword }).expect(200);
  return agent;
}

/** Creates a person of these roles and signs in. */
export async function signedInAs(app: Express, services: Services, roles: Role[]) {
  const { email } = await addPerson(services, { roles, email: `${roles.join(".") || "nobody"}@chain.example` });
  return signedIn(app, email);
}

/** Creates a person of these roles and answers the value of an Authorization header for all their rights. */
export async function bearerOf(
  app: Express,
  services: Services,
  roles: Role[],
  permissions: Permission[] = permissionsOf(roles),
) {
  const agent = await signedInAs(app, services, roles);
  const { body } = await agent.post("/api/tokens").send({ name: "test", permissions }).expect(201);
  return `Bearer ${body.token}`;
}
