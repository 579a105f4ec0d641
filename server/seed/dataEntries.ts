import { NamedDataAlias } from "~server/namedData/namedData.entity";
import { editData, relateData } from "~server/namedData/namedData.service";
import { comparableDataName } from "~shared/dependence/dataName";
import type { DataKind, DataRelation } from "~shared/dependence/namedData";

import { done, type Stage, type Step } from "./stage";

interface StoryThing {
  /** A name that records use. */
  name: string;
  kind: DataKind;
  ra?: string;
  dec?: string;
  extent?: string;
  note?: string;
  aliases?: readonly string[];
}

/** What an editor has found out about names that records use. Coordinates are invented, too. */
const THINGS: readonly StoryThing[] = [
  {
    name: "QV 0719+31",
    kind: "sightline",
    ra: "109.8421",
    dec: "31.0764",
    aliases: ["QV J071922.1+310435", "Vessarin 3"],
  },
  { name: "QV 1147-08", kind: "sightline", ra: "176.9012", dec: "-8.2277" },
  { name: "QV 2302+15", kind: "sightline", ra: "345.6608", dec: "15.3519" },
  { name: "QV 0033-52", kind: "sightline", ra: "8.2974", dec: "-52.1183" },
  {
    name: "RB 1604+22",
    kind: "sightline",
    ra: "241.1206",
    dec: "22.8041",
    note: "Loud at 150 MHz; variable by a third within a year.",
  },
  { name: "GRB-V 220914", kind: "sightline", aliases: ["GRB-V 220914A"] },
  {
    name: "Candlewick forest sample",
    kind: "sample",
    extent: "61 quasars at 5.7 < z < 6.9",
    aliases: ["Candlewick sample"],
  },
  { name: "Candlewick bright spectra", kind: "sample", extent: "the 19 brightest of the 61" },
  { name: "Tallow Down forest sample", kind: "sample", extent: "34 quasars, 6.0 < z < 6.8" },
  { name: "GRB-V stack of four", kind: "sample" },
  { name: "Ninefold narrow-band survey", kind: "field", extent: "9 fields, 14 square degrees" },
  { name: "Ninefold second field", kind: "field", extent: "1.6 square degrees" },
  { name: "Ninefold deep spectra", kind: "sample", extent: "204 galaxies" },
  { name: "Marlpit field 2", kind: "field", ra: "61.5", dec: "-27.5" },
  { name: "Ravel sky survey", kind: "field", extent: "the whole sky without the plane" },
];

const RELATIONS: readonly { name: string; relation: DataRelation; other: string }[] = [
  { name: "Candlewick bright spectra", relation: "subsetOf", other: "Candlewick forest sample" },
  { name: "Ninefold second field", relation: "subsetOf", other: "Ninefold narrow-band survey" },
  { name: "Ninefold deep spectra", relation: "overlaps", other: "Ninefold narrow-band survey" },
];

/** An editor's afternoon with the names, once records have brought them. */
export function dataSteps(stage: Stage): Step[] {
  const find = async (name: string) =>
    (
      await stage.manager.findOneOrFail(NamedDataAlias, {
        where: { comparable: comparableDataName(name).slice(0, 200) },
        relations: { data: true },
      })
    ).data;
  return [
    {
      at: new Date("2026-09-29T13:00:00Z"),
      tell: async (at) => {
        const who = stage.as("editor", at);
        for (const { name, kind, ra, dec, extent, note, aliases } of THINGS) {
          const { slug, version } = await find(name);
          done(
            await editData(who, {
              slug,
              version,
              name,
              kind,
              ra: ra ?? null,
              dec: dec ?? null,
              extent: extent ?? null,
              note: note ?? null,
              aliases: aliases ?? [],
            }),
            `entry ${name}`,
          );
        }
        for (const { name, relation, other } of RELATIONS) {
          const [one, two] = [await find(name), await find(other)];
          done(await relateData(who, one.slug, relation, two.slug), `relation of ${name}`);
        }
      },
    },
  ];
}
