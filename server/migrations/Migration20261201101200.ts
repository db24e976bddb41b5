import { Migration } from "@mikro-orm/migrations";

/** A withdrawal asks whether rows of an extract were replaced by a later one. */
export class Migration20261201101200 extends Migration {
  override async up(): Promise<void> {
    this.addSql(`create index "weekly_sales_history_extract_index" on "weekly_sales_history" ("extract_id");`);
  }

  override async down(): Promise<void> {
    this.addSql(`drop index "weekly_sales_history_extract_index";`);
  }
}
