import { CMB } from "./cmb";
import { CURVES } from "./curves";
import { EMITTERS } from "./emitters";
import { FOREST } from "./forest";
import { GROUPS } from "./groups";
import type { StoryRecord } from "./kinds";
import { LIFE } from "./life";
import { OTHER_METHODS } from "./otherMethods";
import { QUASARS } from "./quasars";
import { REST } from "./rest";
import { TRAPS } from "./traps";
import { UNDER_WAY } from "./underWay";

export { contentOf, type StoryRecord } from "./kinds";

/** The whole story; records get their numbers in the order of their first days. */
export const STORY: readonly StoryRecord[] = [
  ...QUASARS,
  ...FOREST,
  ...EMITTERS,
  ...CMB,
  ...OTHER_METHODS,
  ...CURVES,
  ...GROUPS,
  ...LIFE,
  ...TRAPS,
  ...REST,
  ...UNDER_WAY,
];
