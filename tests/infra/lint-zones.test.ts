import { ESLint } from "eslint";
import { createTypeScriptImportResolver } from "eslint-import-resolver-typescript";
import { importX } from "eslint-plugin-import-x";
import { join, resolve } from "node:path";
import tseslint from "typescript-eslint";
import { describe, expect, it } from "vitest";
import { zonesFor } from "../../infra/lint-zones.mjs";

const house = resolve("tests/infra/planted");

// The same rules and resolver as the project's own configuration, on a house that has a file for every direction.
const inHouse = new ESLint({
  overrideConfigFile: true,
  overrideConfig: {
    files: ["**/*.ts"],
    languageOptions: { parser: tseslint.parser },
    plugins: { "import-x": importX },
    settings: { "import-x/resolver-next": [createTypeScriptImportResolver({ project: "./tsconfig.json" })] },
    rules: {
      "import-x/no-unresolved": "error",
      "import-x/no-restricted-paths": ["error", { zones: zonesFor(house), basePath: house }],
    },
  },
});

async function complaints(eslint: ESLint, filePath: string, imported: string) {
  const [result] = await eslint.lintText(`import "${imported}";\n`, { filePath });
  return result.messages.map((message) => ({ rule: message.ruleId, text: message.message }));
}

const refused = [
  { file: "src/features/apples/new.ts", imported: "../../../server/features/apples", rule: "The client never imports the server" },
  { file: "server/features/apples/new.ts", imported: "../../../src/lib/api-client", rule: "The server never imports the client" },
  { file: "shared/planning/new.ts", imported: "../../server/features/apples", rule: "imports neither" },
  { file: "shared/engine/fit/new.ts", imported: "../../calendar/week", rule: "imports nothing of ours outside itself" },
  { file: "shared/engine/basis/new.ts", imported: "../fit/fit", rule: "only earlier ones" },
  { file: "shared/planning/new.ts", imported: "../contract/shape", rule: "engine and calendar only" },
  { file: "shared/contract/new.ts", imported: "../engine/index", rule: "engine types only" },
  { file: "shared/calendar/new.ts", imported: "../engine/index", rule: "stands alone" },
  { file: "shared/csv/new.ts", imported: "../calendar/week", rule: "The text of tables stands alone" },
  { file: "shared/layouts/new.ts", imported: "../engine/index", rule: "contract and the calendar only" },
  { file: "shared/planning/new.ts", imported: "../layouts/layout", rule: "Only what reads files knows layouts" },
  { file: "src/features/apples/new.ts", imported: "../pears/pear", rule: "never imports another feature" },
  { file: "src/features/apples/new.ts", imported: "../../app/routes", rule: "do not know the routes" },
  { file: "src/components/new.ts", imported: "../features/apples/apple", rule: "know no feature" },
  { file: "src/components/charts/new.ts", imported: "../../lib/api-client", rule: "no fetching" },
  { file: "server/features/apples/apples.service.ts", imported: "../pears/pears.service", rule: "only through its index.ts" },
  { file: "server/features/apples/apples.service.ts", imported: "./apples.routes", rule: "Only index.ts imports routes" },
  { file: "server/features/apples/apples.repository.ts", imported: "./apples.service", rule: "know no service or presenter" },
  { file: "server/features/apples/apples.repository.ts", imported: "./apples.presenter", rule: "know no service or presenter" },
  { file: "server/features/apples/apples.routes.ts", imported: "./apples.repository", rule: "routes -> service -> repository" },
];

const allowed = [
  { file: "src/features/apples/new.ts", imported: "../../lib/api-client" },
  { file: "src/app/new.ts", imported: "../features/apples/apple" },
  { file: "shared/planning/new.ts", imported: "../engine/index" },
  { file: "shared/planning/new.ts", imported: "../calendar/week" },
  { file: "shared/contract/new.ts", imported: "../engine/types" },
  { file: "shared/layouts/new.ts", imported: "../contract/shape" },
  { file: "shared/layouts/new.ts", imported: "../calendar/week" },
  { file: "shared/engine/fit/new.ts", imported: "../basis/basis" },
  { file: "server/features/apples/apples.service.ts", imported: "../pears" },
  { file: "server/features/apples/apples.service.ts", imported: "./apples.repository" },
  { file: "server/features/apples/apples.routes.ts", imported: "./apples.service" },
  { file: "server/features/apples/index.ts", imported: "./apples.routes" },
];

describe("import directions", () => {
  it.each(refused)("refuse $imported in $file", async ({ file, imported, rule }) => {
    const found = await complaints(inHouse, join(house, file), imported);
    expect(found.map((complaint) => complaint.rule)).toContain("import-x/no-restricted-paths");
    expect(found.map((complaint) => complaint.text).join("\n")).toContain(rule);
  });

  it.each(allowed)("allow $imported in $file", async ({ file, imported }) => {
    expect(await complaints(inHouse, join(house, file), imported)).toEqual([]);
  });
});

describe("the project's own lint configuration", () => {
  const own = new ESLint();
  const file = resolve("src/features/planted/new.ts");

  it("reports a client file that imports the server", async () => {
    const found = await complaints(own, file, "../../../server/errors");
    expect(found).toContainEqual({
      rule: "import-x/no-restricted-paths", text: expect.stringContaining("The client never imports the server"),
    });
  });

  it("reports the same import written with an alias of the shared folder", async () => {
    const found = await complaints(own, resolve("shared/engine/planted.ts"), "@shared/contract");
    expect(found.map((complaint) => complaint.rule)).toContain("import-x/no-restricted-paths");
  });

  it("reports an import of a file that does not exist", async () => {
    const found = await complaints(own, file, "./nowhere");
    expect(found.map((complaint) => complaint.rule)).toContain("import-x/no-unresolved");
  });
});
