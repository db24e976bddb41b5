import { z } from "zod";
import { defineEndpoint } from "./endpoint";

/** What a person can be told of by e-mail. */
export const noticeSchema = z.enum(["extract-has-errors", "extract-loaded", "sales-missing"]);
export type Notice = z.infer<typeof noticeSchema>;

/** Whether a person wants each notice. */
export const noticeChoicesSchema = z.record(noticeSchema, z.boolean());
export type NoticeChoices = z.infer<typeof noticeChoicesSchema>;

export const getNoticeChoices = defineEndpoint({
  method: "GET", path: "/api/session/notices", summary: "Which e-mails the caller wants", permission: "read", response: noticeChoicesSchema,
});
export const putNoticeChoices = defineEndpoint({
  method: "PUT", path: "/api/session/notices", summary: "Choose which e-mails to get", permission: "read",
  body: noticeChoicesSchema, response: noticeChoicesSchema,
});
