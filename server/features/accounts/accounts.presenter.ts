import type { Session, Token } from "@shared/contract/accounts";
import { permissionSchema, type Permission } from "@shared/contract/permissions";
import type { AccessToken, Person } from "./accounts.entities";

export function presentSession(person: Person, permissions: ReadonlySet<Permission>, by: Session["by"]): Session {
  const { id, email, name, roles, categories, mustChangePassword } = person;
  return {
    person: { id, email, name, roles, categories, mustChangePassword },
    permissions: permissionSchema.options.filter((permission) => permissions.has(permission)),
    by,
  };
}

export function presentToken(token: AccessToken): Token {
  return {
    id: token.id,
    name: token.name,
    prefix: token.prefix,
    permissions: token.permissions,
    createdAt: token.createdAt.toISOString(),
    expiresAt: token.expiresAt.toISOString(),
    lastUsedAt: token.lastUsedAt?.toISOString() ?? null,
    revokedAt: token.revokedAt?.toISOString() ?? null,
  };
}
