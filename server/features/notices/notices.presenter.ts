import { noticeSchema, type NoticeChoices } from "@shared/contract/notices";
import type { Person } from "../accounts";

export function presentChoices({ unwantedNotices }: Person): NoticeChoices {
  return Object.fromEntries(noticeSchema.options.map((notice) => [notice, !unwantedNotices.includes(notice)])) as NoticeChoices;
}
