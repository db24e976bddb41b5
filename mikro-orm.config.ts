import { ormOptions } from "./server/database/orm";

/** For MikroORM's command line; the application itself uses `createOrm`. */
export default ormOptions(process.env.DATABASE_URL ?? "postgres://postgres@127.0.0.1:5432/shelftide");
