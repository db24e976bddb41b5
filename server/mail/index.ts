export * from "./outbox.entity";
export { mailJobs } from "./mail.jobs";
