import { mkdirSync } from "node:fs";
import { createServer } from "node:http";
import { createMailbox } from "./mailbox.mjs";
import { answerMailPage } from "./mail-page.mjs";
import { createMailListener } from "./mail-listener.mjs";

// Catches every mail and shows it on a page; nothing leaves this machine.
// Called with: SMTP port, page port, folder.
const [smtpPort, pagePort, folder] = process.argv.slice(2);

mkdirSync(folder, { recursive: true, mode: 0o700 });
const mailbox = createMailbox(folder);
const listener = createMailListener(mailbox);
const page = createServer((request, response) => void answerMailPage({ mailbox, request, response }));

const listening = (/** @type {(ready: () => void) => unknown} */ listen) =>
  new Promise((resolve) => void listen(() => resolve(undefined)));
await listening((ready) => listener.listen(Number(smtpPort), "127.0.0.1", ready));
await listening((ready) => page.listen(Number(pagePort), "127.0.0.1", ready));
process.send?.("ready");

const stop = () => process.exit(0);
process.on("disconnect", stop);
process.on("SIGTERM", stop);
