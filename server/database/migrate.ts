import { readEnvironment } from "../environment";
import { createOrm, migrate } from "./orm";

/** Command: brings the database named by DATABASE_URL to the newest migration. */
const orm = await createOrm(readEnvironment());
try {
  await migrate(orm);
} finally {
  await orm.close();
}
