import { undescribed, uselessWords } from "~server/apiWords/describe";
import { createBareSchema, createSchema } from "~server/schema";

describe("the words of the API's schema", () => {
  it("every type, field, argument, enum value and input field has a description", async () => {
    expect(undescribed(await createSchema())).toEqual([]);
  });

  it("no words stand in server/apiWords for what is not in the schema, or says it itself", async () => {
    // One schema only in a process: what describeSchema added to this one would hide the answer.
    expect(uselessWords(await createBareSchema())).toEqual([]);
  });

  it("no description merely repeats the name of what it describes", async () => {
    const repeated: string[] = [];
    for (const type of Object.values((await createSchema()).getTypeMap())) {
      if (type.name.startsWith("__") || !("getFields" in type)) continue;
      for (const { name, description } of Object.values(type.getFields())) {
        if (lettersOf(description ?? "") === lettersOf(name)) repeated.push(`${type.name}.${name}`);
      }
    }
    expect(repeated).toEqual([]);
  });
});

const lettersOf = (text: string): string =>
  text.toLowerCase().replace(/[^a-z]|^the |^a |^an /g, "");
