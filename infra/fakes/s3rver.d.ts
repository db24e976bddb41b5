/** The part of s3rver that the file store's stand-in uses; the package ships no types. */
declare module "s3rver" {
  export default class S3rver {
    constructor(options: {
      address: string;
      port: number;
      directory: string;
      silent: boolean;
      configureBuckets: { name: string }[];
    });
    run(): Promise<unknown>;
  }
}
