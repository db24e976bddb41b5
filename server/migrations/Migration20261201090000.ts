import { Migration } from "@mikro-orm/migrations";

/** What the entities do not describe: sessions, throttling counters, and sales in bulk. */
export class Migration20261201090000 extends Migration {
  override async up(): Promise<void> {
    // connect-pg-simple's table.
    this.addSql(`create table "user_session" ("sid" varchar not null primary key, "sess" json not null, "expire" timestamptz(6) not null);`);
    this.addSql(`create index "user_session_expire_index" on "user_session" ("expire");`);

    // rate-limiter-flexible's table.
    this.addSql(`create table "rate_limits" ("key" varchar(255) not null primary key, "points" integer not null default 0, "expire" bigint);`);

    this.addSql(`create unique index "models_one_in_use_a_product" on "models" ("product_id") where "state" = 'in-use';`);

    // No foreign keys on sales: they would double the time of a load of millions of rows, loads check every
    // code in sets, and stores and products are closed by date, never deleted.
    const columns = `
      "product_id" integer not null,
      "store_id" integer not null,
      "week" date not null,
      "units" numeric(12,3) not null,
      "net_sales" numeric(14,4) not null,
      "regular_price" numeric(14,4) null,
      "shelf_price" numeric(14,4) null,
      "price" numeric(14,4) null,
      "price_source" varchar(12) not null,
      "feature" boolean not null default false,
      "display" boolean not null default false,
      "mechanic" varchar(12) not null default 'none',
      "promotion_days" smallint null,
      "open_days" smallint null,
      "stock_out_days" smallint null,
      "unit_cost" numeric(14,4) null,
      "temperature_c" double precision null,
      "event" varchar(64) null,
      "extract_id" uuid not null`;
    this.addSql(`create table "weekly_sales" (${columns}, primary key ("product_id", "store_id", "week")) partition by range ("week");`);
    this.addSql(`create index "weekly_sales_week_index" on "weekly_sales" using brin ("week");`);

    // What a later extract replaced, kept so that the later one can be withdrawn.
    this.addSql(`create table "weekly_sales_history" (${columns}, "replaced_by" uuid not null, "replaced_at" timestamptz not null);`);
    this.addSql(`create index "weekly_sales_history_replaced_by_index" on "weekly_sales_history" ("replaced_by");`);
    this.addSql(`create index "weekly_sales_history_key_index" on "weekly_sales_history" ("product_id", "store_id", "week");`);

    this.addSql(`
      create function "ensure_sales_partition"("of_year" integer) returns void language plpgsql as $$
      begin
        perform pg_advisory_xact_lock(hashtext('weekly_sales partition'));
        execute format(
          'create table if not exists %I partition of weekly_sales for values from (%L) to (%L)',
          'weekly_sales_' || of_year, make_date(of_year, 1, 1), make_date(of_year + 1, 1, 1));
      end $$;`);
  }

  override async down(): Promise<void> {
    this.addSql(`drop function "ensure_sales_partition";`);
    this.addSql(`drop table "weekly_sales_history", "weekly_sales", "rate_limits", "user_session";`);
    this.addSql(`drop index "models_one_in_use_a_product";`);
  }
}
