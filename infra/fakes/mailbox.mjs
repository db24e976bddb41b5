import { randomBytes } from "node:crypto";
import { readdir, readFile, rename, writeFile } from "node:fs/promises";
import { join } from "node:path";
import { simpleParser } from "mailparser";

/**
 * @typedef {object} CaughtMail
 * @property {string} id
 * @property {string} receivedAt UTC
 * @property {string} from
 * @property {string} to the recipients that the sender named to the server
 * @property {string} subject
 * @property {string} text
 */

/**
 * Mail kept as files in a folder, one each.
 * @param {string} folder
 */
export function createMailbox(folder) {
  /** @type {Map<string, CaughtMail>} */
  const parsed = new Map();

  /** @param {string} id */
  async function read(id) {
    const known = parsed.get(id);
    if (known) return known;
    const { receivedAt, recipients, raw } = JSON.parse(await readFile(join(folder, `${id}.json`), "utf8"));
    const { from, subject, text } = await simpleParser(Buffer.from(raw, "base64"));
    const mail = {
      id, receivedAt, from: from?.text ?? "", to: recipients.join(", "), subject: subject ?? "", text: text ?? "",
    };
    parsed.set(id, mail);
    return mail;
  }

  return {
    /**
     * @param {Buffer} raw the mail as it came
     * @param {string[]} recipients
     */
    async keep(raw, recipients) {
      const receivedAt = new Date().toISOString();
      const id = `${receivedAt.replace(/[^0-9]/g, "")}-${randomBytes(4).toString("hex")}`;
      const path = join(folder, `${id}.json`);
      await writeFile(`${path}.half`, JSON.stringify({ receivedAt, recipients, raw: raw.toString("base64") }), { mode: 0o600 });
      await rename(`${path}.half`, path);
    },

    /**
     * @param {string} [recipient] only mail to this address
     * @returns {Promise<CaughtMail[]>} newest first, 500 at most
     */
    async list(recipient) {
      const names = (await readdir(folder)).filter((name) => name.endsWith(".json")).sort().reverse().slice(0, 500);
      const mails = await Promise.all(names.map((name) => read(name.slice(0, -".json".length))));
      return recipient ? mails.filter((mail) => mail.to.split(", ").includes(recipient)) : mails;
    },

    /**
     * @param {string} id
     * @returns {Promise<CaughtMail | null>}
     */
    async find(id) {
      if (!/^[0-9]+-[0-9a-f]+$/.test(id)) return null;
      return read(id).catch(() => null);
    },
  };
}

/** @typedef {ReturnType<typeof createMailbox>} Mailbox */
