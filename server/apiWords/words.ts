/** Descriptions by type, then by member: "" is the type itself, "field(argument)" an argument. */
export type Words = Readonly<Record<string, Readonly<Record<string, string>>>>;
