/** Whether two records stand on the same data: by name, by alias, as a part of one another, or as stated. */
import { carriesTag } from "~shared/methods/vocabulary";
import type { ConstraintFields } from "~shared/statement/fields";

import { comparableDataName } from "./dataName";

/** A named sightline, field or sample as the registry keeps it. */
export interface NamedThing {
  readonly id: number;
  readonly name: string;
  /** Every spelling it goes by; its name need not be repeated. */
  readonly aliases: readonly string[];
  /** Ids of the larger things it is a part of. */
  readonly subsetOf: readonly number[];
  /** Ids of things it is said to overlap with; said at one end is enough. */
  readonly overlaps: readonly number[];
}

/** What of a record its overlaps are found from. */
export interface DataUser {
  /** FL-0042 */
  readonly number: string;
  readonly fields: Pick<ConstraintFields, "dataUsed" | "dataKnown" | "methodTags">;
}

/** Why two records are not independent. */
export interface SharedData {
  /** A joint inference contains other constraints, so it overlaps with every record. */
  readonly kind: "data" | "jointInference";
  /** What they share, to be read after "shares": "field A", "field A, a part of sample B". */
  readonly via: string;
}

/** The registry's named data, ready to be asked which names stand for overlapping things. */
export class DataRegister {
  private readonly byName = new Map<string, NamedThing>();
  private readonly byId = new Map<number, NamedThing>();
  private readonly parts = new Map<number, ReadonlySet<number>>();
  private readonly partOf = new Map<number, number[]>();
  private readonly stated = new Map<number, Set<number>>();

  /** @param things - In any order; relations to things that are not among them are ignored. */
  constructor(things: readonly NamedThing[]) {
    for (const thing of things) {
      this.byId.set(thing.id, thing);
      for (const name of [thing.name, ...thing.aliases]) {
        this.byName.set(comparableDataName(name), thing);
      }
    }
    for (const { id, subsetOf, overlaps } of things) {
      for (const whole of subsetOf) this.partOf.set(whole, [...(this.partOf.get(whole) ?? []), id]);
      for (const other of overlaps) {
        this.state(id, other);
        this.state(other, id);
      }
    }
  }

  private state(from: number, to: number): void {
    this.stated.set(from, (this.stated.get(from) ?? new Set()).add(to));
  }

  /** Every thing, in the order given. */
  get things(): readonly NamedThing[] {
    return [...this.byId.values()];
  }

  /** The thing that goes by a name, if the registry keeps it. */
  thing(name: string): NamedThing | null {
    return this.byName.get(comparableDataName(name)) ?? null;
  }

  /** Ids of a thing and of everything that is a part of it, through any number of steps. */
  partsOf(id: number): ReadonlySet<number> {
    const known = this.parts.get(id);
    if (known) return known;
    const found = new Set([id]);
    for (const whole of found) for (const part of this.partOf.get(whole) ?? []) found.add(part);
    this.parts.set(id, found);
    return found;
  }

  /**
   * What two names share, or null. Two samples with a common member share it, and what overlaps with
   * a part overlaps with the whole; that two things are parts of one sample says nothing of them.
   */
  shared(a: string, b: string): string | null {
    const [one, two] = [this.thing(a), this.thing(b)];
    if (!one || !two) return comparableDataName(a) === comparableDataName(b) ? a : null;
    if (one.id === two.id) return one.name;
    const [ofOne, ofTwo] = [this.partsOf(one.id), this.partsOf(two.id)];
    if (ofTwo.has(one.id)) return `${one.name}, a part of ${two.name}`;
    if (ofOne.has(two.id)) return `${two.name}, a part of ${one.name}`;
    for (const part of ofOne) {
      if (ofTwo.has(part))
        return `${this.nameOf(part)}, a part of both ${one.name} and ${two.name}`;
    }
    for (const part of ofOne) {
      for (const other of this.stated.get(part) ?? []) {
        if (ofTwo.has(other))
          return `${this.nameOf(part)}, which overlaps with ${this.nameOf(other)}`;
      }
    }
    return null;
  }

  private nameOf(id: number): string {
    return this.byId.get(id)?.name ?? "";
  }
}

function isJoint({ fields }: DataUser): boolean {
  return carriesTag(fields.methodTags, "jointInference");
}

/**
 * Whether two records overlap directly, and by what. Unknown data are a caution, not an overlap; a
 * joint inference overlaps with every record.
 *
 * @returns The first thing they share in the order in which the first record names its data, or null.
 */
export function directOverlap(a: DataUser, b: DataUser, register: DataRegister): SharedData | null {
  for (const mine of namesOf(a)) {
    for (const theirs of namesOf(b)) {
      const via = register.shared(mine, theirs);
      if (via !== null) return { kind: "data", via };
    }
  }
  if (!isJoint(a) && !isJoint(b)) return null;
  const joint = isJoint(a) ? a.number : b.number;
  return { kind: "jointInference", via: `the data of ${joint}, a joint inference` };
}

function namesOf({ fields }: DataUser): readonly string[] {
  return fields.dataKnown === false
    ? []
    : fields.dataUsed.filter((name) => comparableDataName(name) !== "");
}

/**
 * All pairs of records that share named data. Joint inferences are no pairs of this list: that they
 * overlap with every row is a decision of its own.
 *
 * @returns Pairs in the order of the records given, each once.
 */
export function overlapsAmong(
  records: readonly DataUser[],
  register: DataRegister,
): { a: string; b: string; via: string }[] {
  const places = new Map<string, number[]>();
  records.forEach((record, place) => {
    for (const name of new Set(namesOf(record)))
      places.set(name, [...(places.get(name) ?? []), place]);
  });
  const names = [...places.keys()];
  // Names are far fewer than pairs of records: each pair of names is compared once.
  const related = new Map(
    names.map((mine) => [
      mine,
      names.flatMap((theirs) => {
        const via = register.shared(mine, theirs);
        return via === null ? [] : [{ theirs, via }];
      }),
    ]),
  );
  return records.flatMap((record, place) => {
    const found = new Map<number, string>();
    for (const mine of namesOf(record)) {
      for (const { theirs, via } of related.get(mine) ?? []) {
        for (const other of places.get(theirs) ?? []) {
          if (other > place && !found.has(other)) found.set(other, via);
        }
      }
    }
    return [...found]
      .sort(([one], [two]) => one - two)
      .map(([other, via]) => ({ a: record.number, b: records[other]?.number ?? "", via }));
  });
}
