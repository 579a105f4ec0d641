import type { CodegenConfig } from "@graphql-codegen/cli";

const config: CodegenConfig = {
  schema: "graphql/schema.graphql",
  documents: ["graphql/operations/**/*.graphql"],
  generates: {
    "graphql/generated/": {
      preset: "client",
      presetConfig: { fragmentMasking: false },
      config: {
        useTypeImports: true,
        enumsAsTypes: true,
        // A field that may be null is present and null, never absent: the same shape as in shared.
        avoidOptionals: { field: true },
        scalars: { DateTimeISO: "string" },
      },
    },
  },
};

export default config;
