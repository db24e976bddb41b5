import { SMTPServer } from "smtp-server";

const mostBytes = 25 * 2 ** 20;

/**
 * An SMTP server that takes mail from anyone, to anyone, and keeps it.
 * @param {import("./mailbox.mjs").Mailbox} mailbox
 */
export function createMailListener(mailbox) {
  const listener = new SMTPServer({
    authOptional: true,
    // There is no certificate to offer, and nothing leaves the machine.
    disabledCommands: ["STARTTLS"],
    disableReverseLookup: true,
    size: mostBytes,
    onAuth: (_credentials, _session, done) => done(null, { user: "anyone" }),
    onData: (stream, session, done) => {
      const recipients = session.envelope.rcptTo.map((recipient) => recipient.address);
      /** @type {Buffer[]} */
      const chunks = [];
      stream.on("data", (chunk) => chunks.push(chunk));
      stream.on("end", () => {
        if (stream.sizeExceeded) return done(new Error("552 The mail is too large"));
        mailbox.keep(Buffer.concat(chunks), recipients).then(() => done(), done);
      });
    },
  });
  // A sender that was killed in the middle is no reason to end.
  listener.on("error", (error) => console.error(`A connection broke: ${error.message}`));
  return listener;
}
