import { Migration } from "@mikro-orm/migrations";

/** Jobs count what went wrong apart from being handed on, and say whether their subject still has to be put right. */
export class Migration20261201100300 extends Migration {
  override async up(): Promise<void> {
    this.addSql(`alter table "jobs" add column "failures" smallint not null default 0, add column "cleanup_pending" boolean not null default false;`);
    this.addSql(`create index "jobs_cleanup_pending" on "jobs" ("id") where "cleanup_pending";`);
  }

  override async down(): Promise<void> {
    this.addSql(`drop index "jobs_cleanup_pending";`);
    this.addSql(`alter table "jobs" drop column "failures", drop column "cleanup_pending";`);
  }
}
