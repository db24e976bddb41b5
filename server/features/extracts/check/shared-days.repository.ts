import { sharedDaysSql, type Spans } from "../../catalogue";
import { removeBreaches, type Together } from "./together.repository";

/** Rows whose days overlap with others for the same, in the file or in the catalogue, are errors: none of a pair can be trusted. */
export async function rejectSharedDays({ spans, ...together }: Together & { spans: Pick<Spans, "table" | "of"> }): Promise<void> {
  const { em, table } = together;
  await em.execute(`create temporary table shared_days on commit drop as ${sharedDaysSql({ ...spans, staged: table })}`);
  await removeBreaches({
    ...together, rule: "shared-days", column: "first_day", value: "staged.first_day::text", lines: "shared_days",
    reason: "'The days overlap with others for the same, ' || broken.taken",
  });
  await em.execute("drop table shared_days");
}
