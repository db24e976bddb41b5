import type { EntityManager } from "@mikro-orm/postgresql";
import type { Day } from "@shared/calendar";

/** Names of sales files that hold a week and wait to be loaded. */
export async function filesWaitingWith(em: EntityManager, week: Day): Promise<string[]> {
  const rows = await em.execute<{ name: string }[]>(
    `select file_name as name from extracts where kind = 'sales' and state in ('checked', 'loading')
     and ?::date between first_week and last_week order by uploaded_at desc limit 3`,
    [week],
  );
  return rows.map(({ name }) => name);
}
