import { defineEntity, p, type InferEntity } from "@mikro-orm/core";
import type { Notice } from "@shared/contract/notices";

/** A notice that went out once for what it is about, so that a job that runs again sends none twice. */
export const SentNoticeEntity = defineEntity({
  name: "SentNotice",
  tableName: "sent_notices",
  properties: {
    notice: p.string().length(40).primary().$type<Notice>(),
    /** What it is about: an extract's id, or a week. */
    subject: p.string().length(80).primary(),
    sentAt: p.datetime(),
  },
});
export type SentNotice = InferEntity<typeof SentNoticeEntity>;
