import { describe, expect, it } from "vitest";
import { installSentence } from "../../infra/lib/debian.mjs";
import { checkNodeVersion } from "../../infra/lib/node-version.mjs";
import { Problem, sentenceFor } from "../../infra/lib/problem.mjs";
import { lastWords } from "../../infra/lib/run-program.mjs";
import { errorLine } from "../../infra/lib/script.mjs";

describe("what a person is told", () => {
  it("is a problem's own sentence", () => {
    expect(sentenceFor(new Problem("Port 4310 is used."))).toBe("Port 4310 is used.");
  });

  it.each([
    ["EACCES", "No right to read or write /checkout/.data: start as the user the folder belongs to, or give this one the right."],
    ["ENOSPC", "The disk that holds /checkout/.data is full: free some space, then start again."],
    ["EROFS", "/checkout/.data lies on a read-only disk: move the checkout to one that can be written."],
  ])("says what to do about the system's %s", (code, sentence) => {
    expect(sentenceFor(Object.assign(new Error("mkdir"), { code, path: "/checkout/.data" }))).toBe(sentence);
  });

  it("is one line, never a stack trace, for what nobody foresaw", () => {
    const error = new Error("first line\n    at somewhere (file.mjs:1:2)");
    expect(sentenceFor(error)).toBe("Something unexpected went wrong: first line (set SHELFTIDE_DEBUG=1 to see where).");
  });

  it("names what to install, and the other way out", () => {
    const missing = { what: "PostgreSQL", packages: ["postgresql"], otherwise: "set DATABASE_URL to one you have" };
    expect(installSentence({ ...missing, debian: true })).toBe(
      'PostgreSQL is not installed: install it with "sudo apt-get install postgresql", ' +
        "or set DATABASE_URL to one you have, then try again.",
    );
    expect(installSentence({ what: "Chromium", packages: ["chromium"], debian: false })).toBe(
      "Chromium is not installed: install it (Debian calls it chromium), then try again.",
    );
  });

  it("gives the line of a program's output that names its error", () => {
    const output = "server/x.ts:3\n  const a\n        ^\n\nTypeError: a is not a function.\n    at main (server/x.ts:3:1)\n\nNode.js v20";
    expect(errorLine(output)).toBe("TypeError: a is not a function");
    const build = "error during build:\n\n\u001b[31m[UNRESOLVED_IMPORT] \u001b[0mCould not resolve './a' in b.tsx\n  at c (d.mjs:1:2)\n}\n";
    expect(errorLine(build)).toBe("[UNRESOLVED_IMPORT] Could not resolve './a' in b.tsx");
    expect(errorLine("one\ntwo\n")).toBe("two");
    expect(lastWords("one\ntwo.\n    at main (x.ts:3:1)\n")).toBe("two");
  });
});

describe("the version of Node.js", () => {
  it.each(["20.19.0", "20.20.2", "22.0.0", "24.1.0"])("is good enough when it is %s", (version) => {
    expect(() => checkNodeVersion(version)).not.toThrow();
  });

  it.each(["20.18.9", "18.20.4", "4.9.1"])("is refused when it is %s", (version) => {
    expect(() => checkNodeVersion(version)).toThrow(
      `Node.js ${version} is too old: install Node.js 20.19 or newer, then start again.`,
    );
  });
});
