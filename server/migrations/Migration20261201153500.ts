import { Migration } from "@mikro-orm/migrations";

/** A product has one contribution from a day on, as files name it; listings are found by store. */
export class Migration20261201153500 extends Migration {
  override async up(): Promise<void> {
    this.addSql(`alter table "product_funding" add constraint "product_funding_product_id_first_day_unique" unique ("product_id", "first_day");`);

    this.addSql(`create index "listings_store_id_index" on "listings" ("store_id");`);
  }

  override async down(): Promise<void> {
    this.addSql(`alter table "product_funding" drop constraint "product_funding_product_id_first_day_unique";`);

    this.addSql(`drop index "listings_store_id_index";`);
  }
}
