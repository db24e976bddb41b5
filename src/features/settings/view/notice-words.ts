import type { Role } from "@shared/contract/permissions";
import type { Notice } from "@shared/contract/notices";

type NoticeWords = { notice: Notice; label: string; hint: string; roles: readonly Role[] };

/** Each notice in words, and whose work it concerns. */
const notices: readonly NoticeWords[] = [
  {
    notice: "extract-has-errors",
    label: "A file has errors, or waits for someone to confirm how it is read",
    hint: "After its check, with the reasons and what to do: to who uploaded it, and to data admins.",
    roles: ["data-admin"],
  },
  {
    notice: "extract-loaded",
    label: "Sales are loaded",
    hint: "Which weeks, and how many rows are new or changed. Data admins are told of stores, products and other files too.",
    roles: ["data-admin", "planner", "category-manager"],
  },
  {
    notice: "sales-missing",
    label: "Last week’s sales are missing",
    hint: "Once a week, when the hour by which they are due has passed.",
    roles: ["data-admin"],
  },
];

/** The notices that can reach a person of these roles; who has none of them may still have uploaded a file before. */
export const noticesFor = (roles: readonly Role[]): readonly NoticeWords[] => {
  const reaching = notices.filter((words) => words.roles.some((role) => roles.includes(role)));
  return reaching.length > 0 ? reaching : notices.slice(0, 1);
};
