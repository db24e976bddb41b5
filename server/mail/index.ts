export * from "./outbox.entity";
export { mailJobs } from "./mail.jobs";
export { writeMail, type Mail } from "./write-mail";
