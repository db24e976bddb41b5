import type { EntityManager } from "@mikro-orm/postgresql";
import { ProblemError } from "../../errors";
import { guardAgainstGuessing } from "../../http/throttle";
import type { Services } from "../../services";
import type { Person } from "./accounts.entities";
import { personByEmail, personWithPassword } from "./accounts.repository";
import { audit } from "./audit";
import { hashPassword, passwordFits } from "./passwords";

type Attempt = {
  email: string;
  password: string;
  /** Network address the attempt comes from. */
  from: string;
  requestId: string;
};

/**
 * Whose address and password these are.
 *
 * @throws ProblemError 401, the same and after the same work whether the address is unknown, the password wrong or the
 * person disabled; 429 after too many failures of this account or from this network address.
 */
export async function personSigningIn(em: EntityManager, services: Services, attempt: Attempt): Promise<Person> {
  const guard = await guardAgainstGuessing(services, { account: attempt.email, address: attempt.from });
  const person = await personByEmail(em, attempt.email);
  const fits = await passwordFits(attempt.password, person?.passwordHash.unwrap());
  const signedIn = person !== null && fits && !person.disabledAt;
  audit(em, {
    personId: signedIn ? person.id : null,
    action: signedIn ? "session.began" : "session.refused",
    // An unknown address is not kept: people type passwords into the wrong field.
    subject: { kind: "person", id: person?.id },
    detail: { from: attempt.from },
    requestId: attempt.requestId,
  });
  await em.flush();
  if (!signedIn) {
    throw new ProblemError({
      status: 401,
      code: "wrong-credentials",
      detail: "The e-mail address or the password is wrong.",
    });
  }
  await guard.succeeded();
  return person;
}

/** Notes in the audit trail that a person signed out. */
export async function noteSignOut(em: EntityManager, personId: string, requestId: string): Promise<void> {
  audit(em, { personId, action: "session.ended", subject: { kind: "person", id: personId }, requestId });
  await em.flush();
}

type PasswordChange = { personId: string; current: string; next: string; from: string; requestId: string };

/**
 * Replaces a person's password and ends every session made under the one before.
 *
 * @throws ProblemError 422 where the current password is wrong or the next one is the same; 429 after too many tries.
 */
export async function replacePassword(em: EntityManager, services: Services, change: PasswordChange): Promise<Person> {
  const person = await personWithPassword(em, change.personId);
  const guard = await guardAgainstGuessing(services, { account: person.email, address: change.from });
  if (!(await passwordFits(change.current, person.passwordHash.unwrap()))) {
    throw wrongField("wrong-password", "current", "The current password is wrong.");
  }
  await guard.succeeded();
  if (change.current === change.next) {
    throw wrongField("same-password", "next", "The new password is the current one. Choose another.");
  }
  person.passwordHash.set(await hashPassword(change.next));
  person.passwordVersion += 1;
  person.mustChangePassword = false;
  audit(em, {
    personId: person.id,
    action: "password.changed",
    subject: { kind: "person", id: person.id },
    requestId: change.requestId,
  });
  await em.flush();
  return person;
}

function wrongField(code: string, path: string, message: string): ProblemError {
  return new ProblemError({ status: 422, code, detail: message, errors: [{ path, message }] });
}
