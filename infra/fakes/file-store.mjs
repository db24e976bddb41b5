import { mkdirSync } from "node:fs";
import S3rver from "s3rver";

// A file store on this machine alone, that speaks S3 and checks no signatures.
// Called with: port, folder, bucket.
const [port, directory, bucket] = process.argv.slice(2);

mkdirSync(directory, { recursive: true, mode: 0o700 });
const store = new S3rver({
  address: "127.0.0.1", port: Number(port), directory, silent: true, configureBuckets: [{ name: bucket }],
});
await store.run();
process.send?.("ready");

const stop = () => process.exit(0);
process.on("disconnect", stop);
process.on("SIGTERM", stop);
