import { UniqueConstraintViolationException } from "@mikro-orm/core";
import type { EntityManager } from "@mikro-orm/postgresql";
import { emailSchema } from "@shared/contract/accounts";
import type { Role } from "@shared/contract/permissions";
import { conflict, notFound, unusable } from "../../errors";
import { PersonEntity, type Person } from "./accounts.entities";
import { personByEmail, personById } from "./accounts.repository";
import { hashPassword } from "./passwords";

export type NewPerson = {
  email: string;
  name: string;
  roles: Role[];
  /** Codes of the categories a category manager decides on; "*" is every one. */
  categories?: string[];
  password: string;
  mustChangePassword?: boolean;
};

/**
 * Creates a person and flushes.
 *
 * @throws ProblemError 422 for an address that is none, 409 where it is taken.
 */
export async function createPerson(em: EntityManager, person: NewPerson): Promise<Person> {
  const email = emailSchema.safeParse(person.email.trim().toLowerCase());
  if (!email.success) throw unusable("invalid-email", `${person.email} is not an e-mail address.`);
  const taken = conflict("email-taken", `There is someone with the address ${email.data} already.`);
  if (await personByEmail(em, email.data)) throw taken;
  const row = em.create(PersonEntity, {
    email: email.data,
    name: person.name,
    roles: person.roles,
    categories: person.categories ?? [],
    passwordHash: await hashPassword(person.password),
    mustChangePassword: person.mustChangePassword ?? false,
  });
  await em
    .persist(row)
    .flush()
    .catch((error: unknown) => {
      // Someone else was a moment quicker.
      throw error instanceof UniqueConstraintViolationException ? taken : error;
    });
  return row;
}

/** What to call a person in a letter to others. */
export async function personName(em: EntityManager, id: string): Promise<string> {
  return (await personById(em, id))?.name ?? "Someone";
}

/** @throws ProblemError 404 where there is no such person. */
export async function getPerson(em: EntityManager, id: string): Promise<Person> {
  const person = await personById(em, id);
  if (!person) throw notFound("person");
  return person;
}
