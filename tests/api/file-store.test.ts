import { randomBytes, randomUUID } from "node:crypto";
import { Readable } from "node:stream";
import { buffer } from "node:stream/consumers";
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { startTestApp, type TestApp } from "../support/test-app";

let test: TestApp;
beforeAll(async () => {
  test = await startTestApp();
});
afterAll(() => test.stop());

const contentType = "application/octet-stream";

describe("the file store", () => {
  it.each([0, 1, 70_001, 12 * 1024 ** 2 + 7])("gives %i bytes back as they were", async (length) => {
    const { files } = test.services;
    const content = randomBytes(length);
    const key = `test/${randomUUID()}`;
    const pieces = Array.from({ length: Math.ceil(length / 65_536) }, (_, at) => content.subarray(at * 65_536, (at + 1) * 65_536));
    await files.put({ key, body: Readable.from(pieces), contentType });
    expect(Buffer.compare(await buffer(await files.get(key)), content)).toBe(0);
    await files.remove(key);
    await expect(files.get(key)).rejects.toThrow(/not exist/);
  });

  it.each([["before its first part is full", 1_000], ["between two parts", 11 * 1024 ** 2]])("keeps nothing of a body that breaks %s", async (_, length) => {
    const { files } = test.services;
    const key = `test/${randomUUID()}`;
    const body = Readable.from((async function* () {
      yield randomBytes(length);
      throw new Error("the line broke");
    })());
    await expect(files.put({ key, body, contentType })).rejects.toThrow("the line broke");
    await expect(files.get(key)).rejects.toThrow(/not exist/);
  });

  it("gives a file's first bytes, or all of a shorter one", async () => {
    const { files } = test.services;
    const key = `test/${randomUUID()}`;
    const content = randomBytes(200_000);
    await files.put({ key, body: Readable.from([content]), contentType });
    for (const bytes of [1, 65_536, 200_000, 300_000]) expect(Buffer.compare(await files.head(key, bytes), content.subarray(0, bytes))).toBe(0);
    await files.remove(key);
    await expect(files.head(key, 10)).rejects.toThrow(/not exist/);
  });

  it("removes what is not there without complaint, and says that it can be reached", async () => {
    await test.services.files.remove(`test/${randomUUID()}`);
    await test.services.files.check();
  });
});
