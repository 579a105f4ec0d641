import type { Role } from "~shared/review/states";

/** The invented people of the demonstration; the start command prints their addresses. */
export const PEOPLE = {
  contributor: {
    email: "contributor@fogline.example",
    nameOnPapers: "Rosalka Wend",
    roles: ["contributor"],
  },
  second: {
    email: "second-contributor@fogline.example",
    nameOnPapers: "Timor Hasselgrave",
    roles: ["contributor"],
  },
  editor: { email: "editor@fogline.example", nameOnPapers: "Odra Melling", roles: ["editor"] },
  // An author of two of the papers, who therefore may not read them.
  secondEditor: {
    email: "second-editor@fogline.example",
    nameOnPapers: "Pell Thandrell",
    roles: ["editor", "contributor"],
  },
  maintainer: {
    email: "maintainer@fogline.example",
    nameOnPapers: "Juno Ardquist",
    roles: ["maintainer"],
  },
  reader: { email: "reader@fogline.example", nameOnPapers: "Sefa Lornhill", roles: [] },
} as const satisfies Record<
  string,
  { email: string; nameOnPapers: string; roles: readonly Role[] }
>;

export type PersonName = keyof typeof PEOPLE;

export const DEMONSTRATION_PASSWORD = "lifting-fog-2026";
