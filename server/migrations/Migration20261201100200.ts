import { Migration } from "@mikro-orm/migrations";

/** A model says when all its stores were done, and which could not be fitted. */
export class Migration20261201100200 extends Migration {
  override async up(): Promise<void> {
    this.addSql(`alter table "models" add column "fitted_at" timestamptz null, add column "skipped" jsonb not null default '[]';`);
  }

  override async down(): Promise<void> {
    this.addSql(`alter table "models" drop column "fitted_at", drop column "skipped";`);
  }
}
