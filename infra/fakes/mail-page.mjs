const style = `
:root { color-scheme: light dark; --paper: #F5F3EC; --sheet: #FFFEFB; --ink: #1D2B2F; --muted: #5F6E72; --line: #DED9CC; --accent: #17414F; }
@media (prefers-color-scheme: dark) {
  :root { --paper: #15191A; --sheet: #1D2324; --ink: #E9ECE8; --muted: #9CAAAC; --line: #2F3839; --accent: #7FB3C4; }
}
body { margin: 0; background: var(--paper); color: var(--ink); font: 15px/1.5 "Work Sans", system-ui, sans-serif; }
main { max-width: 880px; margin: 0 auto; padding: 32px 20px; }
h1 { font-size: 22px; font-weight: 600; margin: 0 0 4px; }
p.note, time, dt { color: var(--muted); }
p.note { margin: 0 0 20px; }
table { width: 100%; border-collapse: collapse; background: var(--sheet); border: 1px solid var(--line); }
th, td { text-align: left; padding: 8px 12px; border-bottom: 1px solid var(--line); vertical-align: top; }
th { font-weight: 600; font-size: 13px; color: var(--muted); }
a { color: var(--accent); }
dl { display: grid; grid-template-columns: max-content 1fr; gap: 4px 16px; margin: 0 0 20px; }
dd { margin: 0; }
pre { background: var(--sheet); border: 1px solid var(--line); border-radius: 8px; padding: 16px; white-space: pre-wrap; overflow-wrap: anywhere; font: inherit; }
`;

/**
 * Answers a request for the mail page: the list, one mail, or the list for scripts (messages.json?to=ADDRESS).
 * @param {object} options
 * @param {import("./mailbox.mjs").Mailbox} options.mailbox
 * @param {import("node:http").IncomingMessage} options.request
 * @param {import("node:http").ServerResponse} options.response
 */
export async function answerMailPage({ mailbox, request, response }) {
  const url = new URL(request.url ?? "/", "http://localhost");
  const send = (/** @type {number} */ status, /** @type {string} */ type, /** @type {string} */ body) =>
    response.writeHead(status, headers(type)).end(body);
  try {
    // Another name that leads here would be a foreign page's way of reading the mail.
    if (!/^(localhost|127\.0\.0\.1)(:\d+)?$/.test(request.headers.host ?? "")) {
      return send(421, "text/plain", "Open this page by the address that the start command printed.");
    }
    if (url.pathname === "/style.css") return send(200, "text/css", style);
    if (url.pathname === "/messages.json") {
      const messages = await mailbox.list(url.searchParams.get("to") ?? undefined);
      return send(200, "application/json", JSON.stringify({ messages }));
    }
    if (url.pathname === "/") return send(200, "text/html", listPage(await mailbox.list()));
    const mail = await mailbox.find(url.pathname.replace("/messages/", ""));
    if (mail) return send(200, "text/html", mailPage(mail));
    send(404, "text/html", page("Not found", '<p>There is no such mail. <a href="/">All caught mail</a></p>'));
  } catch (error) {
    console.error(error);
    send(500, "text/plain", "The caught mail could not be read; the reason stands in the log of the mail catcher.");
  }
}

/** @param {string} type */
function headers(type) {
  return {
    "Content-Type": `${type}; charset=utf-8`,
    "Content-Security-Policy": "default-src 'none'; style-src 'self'; frame-ancestors 'none'; base-uri 'none'",
    "X-Content-Type-Options": "nosniff",
    "Referrer-Policy": "no-referrer",
    "Cache-Control": "no-store",
  };
}

/** @param {import("./mailbox.mjs").CaughtMail[]} mails */
function listPage(mails) {
  if (mails.length === 0) return page("Caught mail", "<p>No mail yet. What the application sends appears here.</p>");
  const rows = mails.map(
    (mail) => `<tr>
<td><time datetime="${mail.receivedAt}">${shortTime(mail.receivedAt)}</time></td>
<td>${escapeHtml(mail.to)}</td>
<td><a href="/messages/${mail.id}">${escapeHtml(mail.subject || "(no subject)")}</a></td>
</tr>`,
  );
  const head = '<tr><th scope="col">Received (UTC)</th><th scope="col">To</th><th scope="col">Subject</th></tr>';
  return page("Caught mail", `<table><thead>${head}</thead><tbody>${rows.join("")}</tbody></table>`);
}

/** @param {import("./mailbox.mjs").CaughtMail} mail */
function mailPage({ from, to, receivedAt, subject, text }) {
  return page(
    subject || "(no subject)",
    `<dl><dt>From</dt><dd>${escapeHtml(from)}</dd><dt>To</dt><dd>${escapeHtml(to)}</dd>
<dt>Received</dt><dd><time datetime="${receivedAt}">${shortTime(receivedAt)} UTC</time></dd></dl>
<pre>${withLinks(escapeHtml(text))}</pre>
<p><a href="/">All caught mail</a></p>`,
  );
}

/**
 * @param {string} title
 * @param {string} body
 */
function page(title, body) {
  return `<!doctype html>
<html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width">
<title>${escapeHtml(title)} · Shelftide mail</title><link rel="stylesheet" href="/style.css"></head>
<body><main><h1>${escapeHtml(title)}</h1>
<p class="note">Mail is caught on this machine and goes to nobody.</p>
${body}</main></body></html>`;
}

/** @param {string} iso */
const shortTime = (iso) => iso.slice(0, 19).replace("T", " ");

/** @param {string} text */
function escapeHtml(text) {
  const entities = { "&": "&amp;", "<": "&lt;", ">": "&gt;", '"': "&quot;" };
  return text.replace(/[&<>"]/g, (sign) => entities[/** @type {keyof typeof entities} */ (sign)]);
}

/** @param {string} html already escaped */
const withLinks = (html) => html.replace(/https?:\/\/[^\s<]+[^\s<.,;:)]/g, (link) => `<a href="${link}">${link}</a>`);
