import { Migration } from "@mikro-orm/migrations";

/** Layouts of sources, what is loaded of each store and week, and notices by e-mail. */
export class Migration20261201151200 extends Migration {
  override async up(): Promise<void> {
    this.addSql(`create table "saved_layouts" ("id" uuid not null, "name" varchar(80) not null, "kind" varchar(20) not null, "layout" jsonb not null, "updated_by_id" uuid not null, "updated_at" timestamptz not null, "last_used_at" timestamptz null, constraint "saved_layouts_pkey" primary key ("id"));`);
    this.addSql(`alter table "saved_layouts" add constraint "saved_layouts_name_unique" unique ("name");`);

    this.addSql(`create table "sent_notices" ("notice" varchar(40) not null, "subject" varchar(80) not null, "sent_at" timestamptz not null, constraint "sent_notices_pkey" primary key ("notice", "subject"));`);

    this.addSql(`create table "store_weeks" ("store_id" int not null, "week" date not null, "row_count" int not null, "is_restated" boolean not null default false, "extract_id" uuid null, constraint "store_weeks_pkey" primary key ("store_id", "week"));`);
    this.addSql(`create index "store_weeks_week_index" on "store_weeks" ("week");`);

    this.addSql(`alter table "saved_layouts" add constraint "saved_layouts_updated_by_id_foreign" foreign key ("updated_by_id") references "people" ("id") on update cascade;`);

    this.addSql(`alter table "store_weeks" add constraint "store_weeks_extract_id_foreign" foreign key ("extract_id") references "extracts" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "chain" add column "second_look_share" double precision not null default 0.25, add column "sales_due_day" smallint not null default 1, add column "sales_due_hour" smallint not null default 12;`);

    this.addSql(`alter table "people" add column "unwanted_notices" text[] not null default '{}';`);

    this.addSql(`alter table "extracts" add column "layout_origin" varchar(10) null, add column "layout_in_force" jsonb null, add column "saved_layout_id" uuid null, add column "layout_confirmed" boolean not null default false, add column "unknown_codes" jsonb null, add column "coverage_pending" boolean not null default false;`);
    this.addSql(`alter table "extracts" add constraint "extracts_saved_layout_id_foreign" foreign key ("saved_layout_id") references "saved_layouts" ("id") on update cascade on delete set null;`);

    // What is loaded already has yet to be counted.
    this.addSql(`update "extracts" set "coverage_pending" = true where "kind" = 'sales' and "state" = 'loaded';`);
  }

  override async down(): Promise<void> {
    this.addSql(`alter table "extracts" drop constraint "extracts_saved_layout_id_foreign";`);

    this.addSql(`drop table if exists "saved_layouts" cascade;`);

    this.addSql(`drop table if exists "sent_notices" cascade;`);

    this.addSql(`drop table if exists "store_weeks" cascade;`);

    this.addSql(`alter table "chain" drop column "second_look_share", drop column "sales_due_day", drop column "sales_due_hour";`);

    this.addSql(`alter table "people" drop column "unwanted_notices";`);

    this.addSql(`alter table "extracts" drop column "layout_origin", drop column "layout_in_force", drop column "saved_layout_id", drop column "layout_confirmed", drop column "unknown_codes", drop column "coverage_pending";`);
  }
}
