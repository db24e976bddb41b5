import { Migration } from "@mikro-orm/migrations";

/** Extracts know by which sales it was worked out what loading them would change. */
export class Migration20261201160239 extends Migration {
  override async up(): Promise<void> {
    this.addSql(`alter table "extracts" add column "changes_as_of" varchar(60) null;`);
  }

  override async down(): Promise<void> {
    this.addSql(`alter table "extracts" drop column "changes_as_of";`);
  }
}
