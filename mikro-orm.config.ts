import { ormOptions } from "./server/database/orm";

/** For MikroORM's command line, which only creates migrations; the application runs them by `migrate`. */
export default ormOptions(process.env.DATABASE_URL ?? "postgres://postgres@127.0.0.1:5432/shelftide", { snapshot: true });
