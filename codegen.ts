import type { CodegenConfig } from "@graphql-codegen/cli";

const config: CodegenConfig = {
  schema: "graphql/schema.graphql",
  documents: ["graphql/operations/**/*.graphql"],
  generates: {
    "graphql/generated/": {
      preset: "client",
      presetConfig: { fragmentMasking: false },
      config: { useTypeImports: true, enumsAsTypes: true, scalars: { DateTimeISO: "string" } },
    },
  },
};

export default config;
