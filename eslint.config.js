const fs = require("node:fs");
const { builtinModules } = require("node:module");
const path = require("node:path");

const expo = require("eslint-config-expo/flat");
const { defineConfig, globalIgnores } = require("eslint/config");
const importX = require("eslint-plugin-import-x");

/** Concepts of shared/ from the ground up: a later one may use an earlier one, never the reverse. */
const SHARED_ORDER = [
  ...["errors", "numerics", "constants", "identifiers", "methods", "statement", "dependence"],
  ...["cosmology", "history", "likelihood", "inference", "review", "correlatedSet", "event"],
  ...["filter", "table", "fit", "formats", "chart"],
];

const features = foldersOf("src/features");

/** Who may not import whom, each with the way out. */
const zones = [
  {
    target: "./shared",
    from: ["./app", "./src", "./server", "./graphql", "./scripts", "./tests"],
    message: "shared stands alone; pass the value in instead.",
  },
  {
    target: "./graphql",
    from: ["./app", "./src", "./server", "./scripts", "./tests"],
    message: "graphql holds the contract and what is generated from it; nothing of ours goes in.",
  },
  {
    target: ["./app", "./src"],
    from: ["./server", "./scripts", "./tests"],
    message: "The client knows the server only through graphql/; put what both need into shared/.",
  },
  {
    target: "./src",
    from: "./app",
    message: "Routes are one line each and import screens, never the reverse; link by address.",
  },
  {
    target: "./server",
    from: ["./app", "./src", "./graphql", "./scripts", "./tests"],
    message: "The server imports shared/ only; put what both sides need there.",
  },
  ...features.map((feature) => ({
    target: `./src/features/${feature}`,
    from: "./src/features",
    except: [`./${feature}`],
    message: "One feature does not use another: move what both need to src/components or shared/.",
  })),
  ...SHARED_ORDER.slice(0, -1).map((concept, place) => ({
    target: `./shared/${concept}`,
    from: SHARED_ORDER.slice(place + 1).map((later) => `./shared/${later}`),
    message: `shared/${concept} comes before what it imports here; move the common part down.`,
  })),
];

const AGAIN = "shared gives the same answer for the same arguments, everywhere:";

/** What would let a clock, an environment, chance or the outside into shared, each with the way out. */
const ONLY_ARGUMENTS = {
  "no-restricted-globals": [
    "error",
    ...[
      ...["performance", "setTimeout", "setInterval", "setImmediate", "queueMicrotask"],
      ...["requestAnimationFrame", "requestIdleCallback"],
    ].map((name) => ({ name, message: `${AGAIN} pass the time or the pause in instead.` })),
    ...["process", "global", "globalThis", "window", "self", "navigator", "location"].map(
      (name) => ({ name, message: `${AGAIN} pass the value of the environment in instead.` }),
    ),
    ...["document", "localStorage", "sessionStorage", "indexedDB"].map((name) => ({
      name,
      message: `${AGAIN} it belongs to src/; pass the value in instead.`,
    })),
    ...["crypto", "fetch", "XMLHttpRequest", "WebSocket", "require", "Intl"].map((name) => ({
      name,
      message: `${AGAIN} pass the result in instead.`,
    })),
  ],
  "no-restricted-properties": [
    "error",
    { object: "Math", property: "random", message: `${AGAIN} take a seeded RandomStream instead.` },
    { object: "Date", property: "now", message: `${AGAIN} pass the time in instead.` },
    ...["toLocaleString", "toLocaleDateString", "toLocaleTimeString", "localeCompare"].map(
      (property) => ({ property, message: `${AGAIN} write it without the reader's locale.` }),
    ),
  ],
  "no-restricted-syntax": [
    "error",
    {
      selector: "NewExpression[callee.name='Date'][arguments.length=0]",
      message: `${AGAIN} pass the time in instead.`,
    },
    {
      selector: "CallExpression[callee.name='Date']",
      message: `${AGAIN} pass the time in instead.`,
    },
    {
      selector: "ImportExpression",
      message: "shared is whole when it is loaded: import at the top.",
    },
    { selector: "MetaProperty", message: `${AGAIN} where a file lies is not one of them.` },
  ],
  "no-restricted-imports": [
    "error",
    {
      paths: builtinModules.map((name) => ({
        name,
        message: "shared runs in browsers too and does no I/O; pass the value in instead.",
      })),
      patterns: [
        {
          group: ["node:*", "node:*/**"],
          message: "shared runs in browsers too and does no I/O; pass the value in instead.",
        },
        {
          group: [
            ...["react", "react-*", "expo", "expo-*", "@expo/*", "@apollo/*", "graphql", "express"],
            ...["typeorm", "type-graphql", "class-validator", "rxjs", "pino", "mysql2"],
          ],
          message: "shared knows no framework; put this into src/ or server/.",
        },
        {
          group: ["@/*", "~server/*", "~graphql/*"],
          message: "shared stands alone; pass the value in instead.",
        },
      ],
    },
  ],
};

function foldersOf(place) {
  const folder = path.join(__dirname, place);
  if (!fs.existsSync(folder)) return [];
  return fs
    .readdirSync(folder, { withFileTypes: true })
    .filter((entry) => entry.isDirectory())
    .map((entry) => entry.name);
}

module.exports = defineConfig([
  globalIgnores(["dist", "build", "coverage", ".expo", ".fogline", "graphql/generated", "public"]),
  expo,
  {
    plugins: { "import-x": importX },
    settings: { "import-x/resolver": { typescript: { project: "./tsconfig.json" } } },
    rules: {
      "import-x/no-restricted-paths": ["error", { basePath: __dirname, zones }],
      // tsc knows these, and faster.
      "import/export": "off",
      "import/named": "off",
      "import/namespace": "off",
      "import/no-unresolved": "off",
      "import/no-duplicates": "off",
      "import/no-named-as-default": "off",
      "import/no-named-as-default-member": "off",
      "import-x/no-duplicates": "error",
      eqeqeq: ["error", "smart"],
      "no-console": "error",
    },
  },
  {
    files: ["**/*.ts", "**/*.tsx"],
    rules: {
      "@typescript-eslint/no-unused-vars": [
        "error",
        { argsIgnorePattern: "^_", caughtErrorsIgnorePattern: "^_", ignoreRestSiblings: true },
      ],
      "@typescript-eslint/no-explicit-any": "error",
      "@typescript-eslint/consistent-type-imports": ["error", { fixStyle: "inline-type-imports" }],
    },
  },
  {
    // No React in here: functions may be called use….
    files: ["server/**", "shared/**", "scripts/**", "tests/server/**", "tests/e2e/**"],
    rules: { "react-hooks/rules-of-hooks": "off" },
  },
  { files: ["shared/**"], rules: ONLY_ARGUMENTS },
  {
    // Decorators read parameter types at run time, which a type-only import would erase.
    files: ["server/**/*.ts"],
    rules: {
      "@typescript-eslint/consistent-type-imports": "off",
      "@typescript-eslint/no-empty-object-type": [
        "warn",
        { allowInterfaces: "with-single-extends" },
      ],
    },
  },
  {
    files: ["scripts/**/*.js", "*.js", "tests/**/*.js"],
    languageOptions: {
      sourceType: "commonjs",
      globals: Object.fromEntries(
        [
          ...["Buffer", "URL", "__dirname", "__filename", "clearInterval", "clearTimeout"],
          ...["exports", "fetch", "module", "process", "require", "setInterval", "setTimeout"],
        ].map((name) => [name, "readonly"]),
      ),
    },
    rules: { "@typescript-eslint/no-require-imports": "off" },
  },
  { files: ["scripts/lib/nodeVersion.js"], rules: { "no-var": "off" } },
  { files: ["scripts/*.mjs", "scripts/*.ts"], rules: { "no-console": "off" } },
]);
