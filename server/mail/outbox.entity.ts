import { defineEntity, p, type InferEntity } from "@mikro-orm/core";

/** A message written in the same transaction as what it tells of, and sent by a job. */
export const OutboxMessageEntity = defineEntity({
  name: "OutboxMessage",
  tableName: "outbox_messages",
  indexes: [{ properties: ["sentAt", "createdAt"] }],
  properties: {
    id: p.bigint("number").primary().autoincrement(),
    recipient: p.string().length(254),
    subject: p.string().length(200),
    text: p.text(),
    createdAt: p.datetime().onCreate(() => new Date()),
    sentAt: p.datetime().nullable(),
    attempts: p.smallint().default(0),
    lastError: p.string().length(500).nullable(),
  },
});
export type OutboxMessage = InferEntity<typeof OutboxMessageEntity>;
