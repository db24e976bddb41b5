import js from "@eslint/js";
import { createTypeScriptImportResolver } from "eslint-import-resolver-typescript";
import { importX } from "eslint-plugin-import-x";
import reactHooks from "eslint-plugin-react-hooks";
import globals from "globals";
import tseslint from "typescript-eslint";
import { zones } from "./infra/lint-zones.mjs";

// These two speak of what the React Compiler could not do; this build does not use it.
const rulesOfTheCompiler = { "react-hooks/preserve-manual-memoization": "off", "react-hooks/incompatible-library": "off" };

export default tseslint.config(
  { ignores: ["dist/", "node_modules/", ".data/", "coverage/", "tests/infra/planted/"] },
  js.configs.recommended,
  ...tseslint.configs.recommended,
  {
    plugins: { "import-x": importX },
    settings: { "import-x/resolver-next": [createTypeScriptImportResolver({ project: "./tsconfig.json" })] },
    rules: {
      // no-unresolved stays on: without a working resolver the direction rules below report nothing, silently.
      "import-x/no-unresolved": "error",
      "import-x/no-cycle": ["error", { maxDepth: 6 }],
      "import-x/no-restricted-paths": ["error", { zones }],
      "import-x/no-duplicates": "error",
      "@typescript-eslint/no-explicit-any": "error",
      "@typescript-eslint/consistent-type-imports": "error",
      "@typescript-eslint/no-unused-vars": ["error", { argsIgnorePattern: "^_", varsIgnorePattern: "^_" }],
      "max-lines": ["error", { max: 400, skipBlankLines: true, skipComments: true }],
      eqeqeq: ["error", "smart"],
      "no-console": "error",
    },
  },
  { files: ["src/**/*.{ts,tsx}"], languageOptions: { globals: globals.browser }, plugins: { "react-hooks": reactHooks }, rules: { ...reactHooks.configs.recommended.rules, ...rulesOfTheCompiler } },
  { files: ["public/**"], languageOptions: { globals: globals.browser } },
  { files: ["infra/**", "demo/**", "tests/bench/**", "server/main.ts", "server/worker.ts"], languageOptions: { globals: globals.node }, rules: { "no-console": "off" } },
);
