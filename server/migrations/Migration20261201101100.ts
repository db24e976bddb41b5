import { Migration } from "@mikro-orm/migrations";

/** What extracts need besides their entities: exact counts, rows between check and load, and what a withdrawal must know. */
export class Migration20261201101100 extends Migration {
  override async up(): Promise<void> {
    this.addSql(`alter table "extracts" add column "issue_counts" jsonb null;`);

    // One unlogged table an extract, from its check to its load; see infra/decisions/0020-rows-between-check-and-load.md.
    this.addSql(`create schema "staging";`);

    // A load whose rows were there already, unchanged, writes no sales rows. Withdrawing the extract they came from
    // would take them from the later one too, so it is noted which extracts a load confirmed.
    this.addSql(`
      create table "sales_confirmations" (
        "extract_id" uuid not null references "extracts" ("id") on delete cascade,
        "confirmed_extract_id" uuid not null references "extracts" ("id") on delete cascade,
        "row_count" integer not null,
        primary key ("extract_id", "confirmed_extract_id"));`);
    this.addSql(`create index "sales_confirmations_confirmed_index" on "sales_confirmations" ("confirmed_extract_id");`);

    // Files on their way into the store: what a killed process left behind is found here and removed.
    this.addSql(`
      create table "incoming_files" (
        "storage_key" varchar(200) not null primary key,
        "begun_at" timestamptz not null);`);
  }

  override async down(): Promise<void> {
    this.addSql(`drop table "incoming_files", "sales_confirmations";`);
    this.addSql(`drop schema "staging" cascade;`);
    this.addSql(`alter table "extracts" drop column "issue_counts";`);
  }
}
