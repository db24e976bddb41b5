import { Migration } from "@mikro-orm/migrations";

export class Migration20261201080000 extends Migration {

  override async up(): Promise<void> {
    this.addSql(`create table "categories" ("id" serial primary key, "code" varchar(64) not null, "name" varchar(120) not null);`);
    this.addSql(`alter table "categories" add constraint "categories_code_unique" unique ("code");`);

    this.addSql(`create table "chain" ("id" int not null, "name" varchar(120) not null, "currency" varchar(3) not null, "locale" varchar(35) not null, "time_zone" varchar(64) not null, "calendar" varchar(10) not null, "week_start" smallint not null, "temperature_unit" varchar(12) not null, "interval_level" double precision not null default 0.8, "upload_limit_bytes" bigint not null, constraint "chain_pkey" primary key ("id"));`);

    this.addSql(`create table "events" ("id" serial primary key, "code" varchar(64) not null, "name" varchar(120) not null, "first_day" date not null, "last_day" date not null, "region" varchar(80) not null default '');`);
    this.addSql(`alter table "events" add constraint "events_code_first_day_region_unique" unique ("code", "first_day", "region");`);

    this.addSql(`create table "outbox_messages" ("id" bigserial primary key, "recipient" varchar(254) not null, "subject" varchar(200) not null, "text" text not null, "created_at" timestamptz not null, "sent_at" timestamptz null, "attempts" smallint not null default 0, "last_error" varchar(500) null);`);
    this.addSql(`create index "outbox_messages_sent_at_created_at_index" on "outbox_messages" ("sent_at", "created_at");`);

    this.addSql(`create table "people" ("id" uuid not null, "email" varchar(254) not null, "name" varchar(120) not null, "password_hash" varchar(255) not null, "roles" text[] not null, "categories" text[] not null default '{}', "must_change_password" boolean not null default false, "disabled_at" timestamptz null, "created_at" timestamptz not null, constraint "people_pkey" primary key ("id"));`);
    this.addSql(`alter table "people" add constraint "people_email_unique" unique ("email");`);

    this.addSql(`create table "jobs" ("id" uuid not null, "kind" varchar(60) not null, "state" varchar(12) not null default 'queued', "payload" jsonb not null, "done" double precision not null default 0, "total" double precision null, "message" varchar(200) not null default '', "subject" varchar(120) null, "result" jsonb null, "error" jsonb null, "attempt" smallint not null default 0, "heartbeat_at" timestamptz null, "singleton_key" varchar(120) null, "cancel_requested" boolean not null default false, "created_by_id" uuid null, "created_at" timestamptz not null, "started_at" timestamptz null, "finished_at" timestamptz null, constraint "jobs_pkey" primary key ("id"));`);
    this.addSql(`create index "jobs_state_created_at_index" on "jobs" ("state", "created_at");`);
    this.addSql(`create index "jobs_subject_index" on "jobs" ("subject");`);
    this.addSql(`create index "jobs_singleton_key_index" on "jobs" ("singleton_key");`);

    this.addSql(`create table "extracts" ("id" uuid not null, "kind" varchar(20) not null, "file_name" varchar(255) not null, "size_bytes" bigint not null, "sha256" varchar(64) not null, "storage_key" varchar(200) not null, "layout" varchar(80) null, "state" varchar(12) not null default 'received', "rows_read" int null, "rows_usable" int null, "error_count" int null, "warning_count" int null, "first_week" date null, "last_week" date null, "changes" jsonb null, "failure" jsonb null, "job_id" uuid null, "uploaded_by_id" uuid not null, "uploaded_at" timestamptz not null, "checked_at" timestamptz null, "loaded_at" timestamptz null, "withdrawn_at" timestamptz null, constraint "extracts_pkey" primary key ("id"));`);
    this.addSql(`create index "extracts_uploaded_at_index" on "extracts" ("uploaded_at");`);

    this.addSql(`create table "extract_issues" ("id" bigserial primary key, "extract_id" uuid not null, "line" int not null, "column_name" varchar(80) not null, "value" varchar(200) not null, "severity" varchar(8) not null, "rule" varchar(60) not null, "reason" varchar(400) not null, "remedy" varchar(400) not null);`);
    this.addSql(`create index "extract_issues_extract_id_line_id_index" on "extract_issues" ("extract_id", "line", "id");`);

    this.addSql(`create table "audit_entries" ("id" bigserial primary key, "at" timestamptz not null, "person_id" uuid null, "token_id" uuid null, "action" varchar(60) not null, "subject_kind" varchar(40) not null, "subject_id" varchar(80) null, "detail" jsonb null, "request_id" varchar(64) null);`);
    this.addSql(`create index "audit_entries_subject_kind_subject_id_index" on "audit_entries" ("subject_kind", "subject_id");`);
    this.addSql(`create index "audit_entries_at_index" on "audit_entries" ("at");`);

    this.addSql(`create table "access_tokens" ("id" uuid not null, "person_id" uuid not null, "name" varchar(80) not null, "prefix" varchar(16) not null, "hash" varchar(64) not null, "permissions" text[] not null, "created_at" timestamptz not null, "expires_at" timestamptz not null, "last_used_at" timestamptz null, "revoked_at" timestamptz null, constraint "access_tokens_pkey" primary key ("id"));`);
    this.addSql(`alter table "access_tokens" add constraint "access_tokens_hash_unique" unique ("hash");`);

    this.addSql(`create table "products" ("id" serial primary key, "code" varchar(64) not null, "name" varchar(160) not null, "gtin" varchar(14) null, "brand" varchar(120) null, "category_id" int not null, "sold_by_weight" boolean not null default false, "replaces_id" int null, "replaces_size_ratio" numeric(10,4) null);`);
    this.addSql(`alter table "products" add constraint "products_code_unique" unique ("code");`);

    this.addSql(`create table "models" ("id" uuid not null, "product_id" int not null, "state" varchar(12) not null default 'candidate', "spec" jsonb null, "first_week" date null, "last_week" date null, "job_id" uuid null, "created_by_id" uuid not null, "created_at" timestamptz not null, "used_from" timestamptz null, "used_until" timestamptz null, "used_by_id" uuid null, constraint "models_pkey" primary key ("id"));`);
    this.addSql(`create index "models_product_id_state_index" on "models" ("product_id", "state");`);

    this.addSql(`create table "product_funding" ("id" serial primary key, "product_id" int not null, "first_day" date not null, "last_day" date not null, "per_unit" numeric(14,4) not null default 0, "lump_sum" numeric(14,4) not null default 0);`);

    this.addSql(`create table "product_terms" ("product_id" int not null, "valid_from" date not null, "unit_cost" numeric(14,4) null, "regular_price" numeric(14,4) null, "tax_rate" numeric(6,4) not null default 0, constraint "product_terms_pkey" primary key ("product_id", "valid_from"));`);

    this.addSql(`create table "scenarios" ("id" uuid not null, "name" varchar(120) not null, "product_id" int not null, "model_id" uuid not null, "stores" text[] not null, "first_week" date not null, "last_week" date not null, "cells" jsonb not null, "fixed_cost" numeric(14,4) not null default 0, "state" varchar(12) not null default 'draft', "version" int not null default 1, "created_by_id" uuid not null, "created_at" timestamptz not null, "updated_by_id" uuid not null, "updated_at" timestamptz not null, constraint "scenarios_pkey" primary key ("id"));`);
    this.addSql(`create index "scenarios_updated_at_index" on "scenarios" ("updated_at");`);
    this.addSql(`create index "scenarios_product_id_state_index" on "scenarios" ("product_id", "state");`);

    this.addSql(`create table "stores" ("id" serial primary key, "code" varchar(64) not null, "name" varchar(120) not null, "region" varchar(80) not null, "opened" date null, "closed" date null);`);
    this.addSql(`alter table "stores" add constraint "stores_code_unique" unique ("code");`);

    this.addSql(`create table "model_fits" ("model_id" uuid not null, "store_id" int not null, "fit" text not null, "summary" jsonb not null, "created_at" timestamptz not null, constraint "model_fits_pkey" primary key ("model_id", "store_id"));`);

    this.addSql(`create table "listings" ("product_id" int not null, "store_id" int not null, "first_day" date not null, "last_day" date null, constraint "listings_pkey" primary key ("product_id", "store_id", "first_day"));`);

    this.addSql(`create table "temperatures" ("id" serial primary key, "week" date not null, "region" varchar(80) not null default '', "store_code" varchar(64) not null default '', "temperature_c" double precision not null);`);
    this.addSql(`alter table "temperatures" add constraint "temperatures_week_region_store_code_unique" unique ("week", "region", "store_code");`);

    this.addSql(`alter table "jobs" add constraint "jobs_created_by_id_foreign" foreign key ("created_by_id") references "people" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "extracts" add constraint "extracts_uploaded_by_id_foreign" foreign key ("uploaded_by_id") references "people" ("id") on update cascade;`);

    this.addSql(`alter table "extract_issues" add constraint "extract_issues_extract_id_foreign" foreign key ("extract_id") references "extracts" ("id") on update cascade on delete cascade;`);

    this.addSql(`alter table "audit_entries" add constraint "audit_entries_person_id_foreign" foreign key ("person_id") references "people" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "access_tokens" add constraint "access_tokens_person_id_foreign" foreign key ("person_id") references "people" ("id") on update cascade on delete cascade;`);

    this.addSql(`alter table "products" add constraint "products_category_id_foreign" foreign key ("category_id") references "categories" ("id") on update cascade;`);
    this.addSql(`alter table "products" add constraint "products_replaces_id_foreign" foreign key ("replaces_id") references "products" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "models" add constraint "models_product_id_foreign" foreign key ("product_id") references "products" ("id") on update cascade;`);
    this.addSql(`alter table "models" add constraint "models_created_by_id_foreign" foreign key ("created_by_id") references "people" ("id") on update cascade;`);
    this.addSql(`alter table "models" add constraint "models_used_by_id_foreign" foreign key ("used_by_id") references "people" ("id") on update cascade on delete set null;`);

    this.addSql(`alter table "product_funding" add constraint "product_funding_product_id_foreign" foreign key ("product_id") references "products" ("id") on update cascade on delete cascade;`);

    this.addSql(`alter table "product_terms" add constraint "product_terms_product_id_foreign" foreign key ("product_id") references "products" ("id") on update cascade on delete cascade;`);

    this.addSql(`alter table "scenarios" add constraint "scenarios_product_id_foreign" foreign key ("product_id") references "products" ("id") on update cascade;`);
    this.addSql(`alter table "scenarios" add constraint "scenarios_model_id_foreign" foreign key ("model_id") references "models" ("id") on update cascade;`);
    this.addSql(`alter table "scenarios" add constraint "scenarios_created_by_id_foreign" foreign key ("created_by_id") references "people" ("id") on update cascade;`);
    this.addSql(`alter table "scenarios" add constraint "scenarios_updated_by_id_foreign" foreign key ("updated_by_id") references "people" ("id") on update cascade;`);

    this.addSql(`alter table "model_fits" add constraint "model_fits_model_id_foreign" foreign key ("model_id") references "models" ("id") on update cascade on delete cascade;`);
    this.addSql(`alter table "model_fits" add constraint "model_fits_store_id_foreign" foreign key ("store_id") references "stores" ("id") on update cascade;`);

    this.addSql(`alter table "listings" add constraint "listings_product_id_foreign" foreign key ("product_id") references "products" ("id") on update cascade on delete cascade;`);
    this.addSql(`alter table "listings" add constraint "listings_store_id_foreign" foreign key ("store_id") references "stores" ("id") on update cascade on delete cascade;`);
  }

}
