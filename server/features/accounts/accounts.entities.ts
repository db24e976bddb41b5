import { defineEntity, p, type InferEntity } from "@mikro-orm/core";
import { randomUUID } from "node:crypto";
import type { Notice } from "@shared/contract/notices";
import type { Permission, Role } from "@shared/contract/permissions";

export const PersonEntity = defineEntity({
  name: "Person",
  tableName: "people",
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    /** Kept in lower case. */
    email: p.string().length(254).unique(),
    name: p.string().length(120),
    passwordHash: p.string().length(255).hidden().lazy(),
    roles: p.array().$type<Role[]>(),
    /** Codes of the categories a category manager decides on; "*" is every one. */
    categories: p.array().$type<string[]>().default([]),
    /** E-mails the person does not want; all others that concern them are sent. */
    unwantedNotices: p.array().$type<Notice[]>().default([]),
    mustChangePassword: p.boolean().default(false),
    /** Goes up with every new password; a session made under an earlier one has ended. */
    passwordVersion: p.integer().default(1),
    disabledAt: p.datetime().nullable(),
    createdAt: p.datetime().onCreate(() => new Date()),
  },
});
export type Person = InferEntity<typeof PersonEntity>;

export const AccessTokenEntity = defineEntity({
  name: "AccessToken",
  tableName: "access_tokens",
  indexes: [{ properties: ["person"] }],
  properties: {
    id: p
      .uuid()
      .primary()
      .onCreate(() => randomUUID()),
    person: () => p.manyToOne(PersonEntity).deleteRule("cascade"),
    name: p.string().length(80),
    prefix: p.string().length(16),
    /** SHA-256 of the token: it is random and long, so a slow hash would add nothing. */
    hash: p.string().length(64).unique().hidden(),
    permissions: p.array().$type<Permission[]>(),
    createdAt: p.datetime().onCreate(() => new Date()),
    expiresAt: p.datetime(),
    lastUsedAt: p.datetime().nullable(),
    revokedAt: p.datetime().nullable(),
  },
});
export type AccessToken = InferEntity<typeof AccessTokenEntity>;

/** Who did what to which thing, when; never changed or removed. */
export const AuditEntryEntity = defineEntity({
  name: "AuditEntry",
  tableName: "audit_entries",
  indexes: [{ properties: ["subjectKind", "subjectId"] }, { properties: ["at"] }],
  properties: {
    id: p.bigint("number").primary().autoincrement(),
    at: p.datetime().onCreate(() => new Date()),
    /** Null for the system itself. */
    person: () => p.manyToOne(PersonEntity).nullable(),
    tokenId: p.uuid().nullable(),
    action: p.string().length(60),
    subjectKind: p.string().length(40),
    subjectId: p.string().length(80).nullable(),
    detail: p.json<Record<string, unknown>>().nullable(),
    requestId: p.string().length(64).nullable(),
  },
});
export type AuditEntry = InferEntity<typeof AuditEntryEntity>;
