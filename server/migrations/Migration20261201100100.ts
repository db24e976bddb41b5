import { Migration } from "@mikro-orm/migrations";

/** What signing in, tokens and job keys need beyond the first tables. */
export class Migration20261201100100 extends Migration {
  override async up(): Promise<void> {
    this.addSql(`alter table "people" add column "password_version" int not null default 1;`);
    this.addSql(`create index "access_tokens_person_id_index" on "access_tokens" ("person_id");`);
    this.addSql(`create index "rate_limits_expire_index" on "rate_limits" ("expire");`);
    // The queue looks before it adds; this holds even where two look at once.
    this.addSql(`create unique index "jobs_one_waiting_a_key" on "jobs" ("singleton_key") where "state" in ('queued', 'running');`);
  }

  override async down(): Promise<void> {
    this.addSql(`drop index "jobs_one_waiting_a_key", "rate_limits_expire_index", "access_tokens_person_id_index";`);
    this.addSql(`alter table "people" drop column "password_version";`);
  }
}
