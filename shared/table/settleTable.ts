/** From the records of a filter to the rows of a table: what is in, what is out and why, and what is still open. */
import {
  rowLikelihood,
  type RowLeftOut,
  type RowLikelihood,
  type RowOptions,
} from "~shared/likelihood";
import type { TableSpec } from "~shared/likelihood/compile";
import { marginalCorrelation } from "~shared/likelihood/correlatedSet";
import { equalMixtureSd } from "~shared/likelihood/mixture";
import { carriesTag, familiesOf, methodsOf, type MethodFamily } from "~shared/methods/vocabulary";
import { asUsed, type AsUsed } from "~shared/statement/asUsed";
import { CONDITION_KINDS, type ConditionKind } from "~shared/statement/fields";
import { conditionWord } from "~shared/statement/words";

import {
  settles,
  type ConditionPath,
  type Decision,
  type DecisionKind,
  type DecisionOption,
  type TableChoices,
  type TableRecord,
  type TableSet,
  type TableSurroundings,
  type TakenDecision,
} from "./decision";
import { byRecordNumber, chooseRows, overlapClusters, type Overlap } from "./overlapClusters";

export interface SettledRow {
  readonly number: string;
  readonly included: boolean;
  /** Why it is out; null for a row that is in. */
  readonly reason: string | null;
  /** Ids of decisions about it that are still open. */
  readonly open: readonly string[];
  readonly cautions: readonly string[];
  readonly used: AsUsed | null;
  /** What was decided about its likelihood. */
  readonly options: RowOptions;
  /** Why a form other than the default was chosen. */
  readonly formReason: string | null;
  /** Its likelihood with those options, or why it has none. */
  readonly likelihood: RowLikelihood | RowLeftOut;
  /** Share in the mixture of its alternatives; 1 for a row that stands for itself. */
  readonly weight: number;
  /** Label of its alternatives while it enters as a mixture. */
  readonly mixture: string | null;
  /** Id of the correlated set it enters with. */
  readonly set: string | null;
}

export interface SettledMixture {
  readonly label: string;
  readonly members: readonly string[];
  /** Of the equal mixture on the real line; null where a member is no two-sided value with a level. */
  readonly standardDeviation: number | null;
}

export interface SettledSet {
  readonly id: string;
  readonly label: string;
  /** Members in the table, [m]. */
  readonly members: readonly string[];
  /** Their correlation matrix, [m, m]: of a part, the exact marginal. */
  readonly rho: readonly (readonly number[])[];
  /** Whether every member of the set is in the table. */
  readonly whole: boolean;
}

export interface SettledTable {
  /** In the order of the records given. */
  readonly rows: readonly SettledRow[];
  /** Every decision the table meets, in the order in which they are settled. */
  readonly decisions: readonly Decision[];
  /** How many of them are open; a table is complete at none. */
  readonly open: number;
  readonly mixtures: readonly SettledMixture[];
  readonly sets: readonly SettledSet[];
}

/**
 * Settles a table. Where a decision is open, its proposal is assumed for what follows from it, but
 * a row without a level stays out until one is chosen.
 *
 * @param records - What the filter matches, each number once, in the table's order.
 * @param surroundings - Overlaps, conditions and correlated sets; those of other records are ignored.
 * @param choices - What a person chose; what no longer fits a decision leaves that decision open.
 */
export function settleTable(
  records: readonly TableRecord[],
  surroundings: TableSurroundings,
  choices: TableChoices,
): SettledTable {
  return new Settling(records, surroundings, choices).settle();
}

interface Row {
  readonly record: TableRecord;
  readonly used: AsUsed | null;
  reason: string | null;
  options: RowOptions;
  formReason: string | null;
  mixture: string | null;
  readonly open: string[];
  readonly cautions: string[];
}

interface Question {
  kind: DecisionKind;
  /** What the id names beside the kind; the rows unless said. */
  about?: string;
  rows: readonly Row[];
  words: string;
  options: readonly DecisionOption[];
  proposed: string;
  because: string;
}

const OUT: DecisionOption = { code: "out", words: "Leave it out", override: false };

class Settling {
  private readonly rows: Row[];
  private readonly byNumber: ReadonlyMap<string, Row>;
  private readonly decisions: Decision[] = [];
  private readonly taken: ReadonlyMap<string, TakenDecision>;

  constructor(
    records: readonly TableRecord[],
    private readonly surroundings: TableSurroundings,
    private readonly choices: TableChoices,
  ) {
    const out = new Map(choices.out.map(({ number, reason }) => [number, reason]));
    const forms = new Map(choices.forms.map((choice) => [choice.number, choice]));
    this.rows = records.map((record) => {
      const form = forms.get(record.number);
      return {
        record,
        used: asUsed(record.fields),
        reason: out.has(record.number) ? `Taken out: ${out.get(record.number)}` : null,
        options: form ? { ...form.options } : {},
        formReason: form?.reason ?? null,
        mixture: null,
        open: [],
        cautions: [],
      };
    });
    this.byNumber = new Map(this.rows.map((row) => [row.record.number, row]));
    this.taken = new Map(choices.decisions.map((one) => [one.id, one]));
  }

  settle(): SettledTable {
    this.leaveOutUnusable();
    this.decideSuperseded();
    this.decideAboutAll("preprintOnly", ({ fields }) => fields.versionRead === "preprint", {
      words: "read in a preprint only: numbers may change in print",
      because: "the registry keeps which version was read, and says when a newer one is recorded",
    });
    this.decideAboutAll("readOffFigure", ({ fields }) => fields.readOffFigure === true, {
      words: "read off a figure, with a digitizing error beside that of the paper",
      because: "the digitizing error stands in the record; compare it with the stated one",
    });
    this.decideLevels();
    this.decideMassWeighted();
    this.decideLimitForms();
    this.leaveOutWithoutLikelihood();
    this.decideAlternatives();
    this.decideJointInference();
    this.decideOverlaps();
    this.decideConditioned();
    const sets = this.decideSets();
    this.addCautions();
    return this.result(sets);
  }

  // ---- Asking

  private included(): Row[] {
    return this.rows.filter((row) => row.reason === null);
  }

  /** Puts a question and gives the code of the option that holds: the one taken, else the proposal. */
  private ask(question: Question): { option: string; open: boolean } {
    const rows = question.rows.map((row) => row.record.number).sort(byRecordNumber);
    const id = `${question.kind}:${question.about ?? rows.join("+")}`;
    const stored = this.taken.get(id);
    const { kind, words, options, proposed, because } = question;
    const taken = stored && settles({ id, options, proposed }, stored) ? stored : null;
    this.decisions.push({ id, kind, rows, words, options, proposed, because, taken });
    if (!taken) for (const row of question.rows) row.open.push(id);
    return { option: taken?.option ?? proposed, open: taken === null };
  }

  // ---- What a row is by itself

  private leaveOutUnusable(): void {
    for (const row of this.included()) {
      if (row.record.state === "withdrawn") row.reason = "Withdrawn";
      else if (row.record.fields.kind === "qualitative") {
        row.reason = "Qualitative: shown, never fitted";
      } else if (row.used === null) row.reason = "Not complete enough to use";
    }
  }

  private decideSuperseded(): void {
    for (const row of this.included()) {
      if (row.record.state !== "superseded") continue;
      const { number, supersededBy } = row.record;
      const words = supersededBy ? `superseded by ${supersededBy}` : "superseded";
      const { option } = this.ask({
        kind: "superseded",
        rows: [row],
        words: `${named(row)} is ${words}.`,
        options: [OUT, { code: "keep", words: `Keep ${number}, with a reason`, override: true }],
        proposed: "out",
        because: "its authors or the registry put another number in its place",
      });
      if (option === "out") row.reason = capital(words);
    }
  }

  private decideAboutAll(
    kind: "preprintOnly" | "readOffFigure",
    concerns: (record: TableRecord) => boolean,
    say: { words: string; because: string },
  ): void {
    const rows = this.included().filter((row) => concerns(row.record));
    if (rows.length === 0) return;
    const several = rows.length > 1;
    const { option } = this.ask({
      kind,
      rows,
      words: several
        ? `${rows.length} rows were ${say.words}: ${rows.map(named).join(", ")}.`
        : `${named(rows[0] as Row)} was ${say.words}.`,
      options: [
        { code: "take", words: several ? "Take them" : "Take it", override: false },
        { code: "out", words: several ? "Leave them out" : "Leave it out", override: false },
      ],
      proposed: "take",
      because: say.because,
    });
    if (option !== "out") return;
    for (const row of rows) {
      row.reason = kind === "preprintOnly" ? "Read in a preprint only" : "Read off a figure";
    }
  }

  private decideLevels(): void {
    for (const row of this.included()) {
      if (row.record.fields.level !== "notStated" || row.record.fields.kind === "curve") continue;
      const { option, open } = this.ask({
        kind: "levelNotStated",
        rows: [row],
        words: `${named(row)} prints its errors without a level.`,
        options: [
          { code: "level:0.6827", words: "Read as 68.27 %", override: false },
          { code: "level:0.95", words: "Read as 95 %", override: false },
          OUT,
        ],
        proposed: "level:0.6827",
        because: "errors without a level are most often meant as one sigma",
      });
      if (open || option === "out") row.reason = "Level not stated";
      else row.options = { ...row.options, level: Number(option.slice("level:".length)) };
    }
  }

  private decideMassWeighted(): void {
    for (const row of this.included()) {
      if (this.likelihood(row, "massWeighted") === null) continue;
      const { option } = this.ask({
        kind: "massWeighted",
        rows: [row],
        words: `${named(row)} is mass-weighted, and histories are volume-weighted; no conversion exists without a simulation.`,
        options: [
          OUT,
          { code: "asVolume", words: "Use it as a volume average, with a reason", override: true },
        ],
        proposed: "out",
        because: "a mass average lies below the volume average while reionization goes inside out",
      });
      if (option === "out") row.reason = "Mass-weighted: not converted to a volume average";
      else row.options = { ...row.options, acceptMassWeighted: true };
    }
  }

  private decideLimitForms(): void {
    for (const row of this.included()) {
      if (this.likelihood(row, "limitNeedsForm") === null) continue;
      const { option } = this.ask({
        kind: "limitForm",
        rows: [row],
        words: `${named(row)} is a limit without a width of its own on a quantity that has no bounded range.`,
        options: [{ code: "hardStep", words: "Take it as a hard step", override: false }, OUT],
        proposed: "hardStep",
        because: "nothing in the paper says how fast the likelihood falls beyond the limit",
      });
      if (option === "out") row.reason = "Limit without a form";
      else row.options = { ...row.options, form: "hardStep" };
    }
  }

  /** The row's obstacle if it is this one, else null. */
  private likelihood(row: Row, code: RowLeftOut["code"]): RowLeftOut | null {
    const likelihood = rowLikelihood(row.used, row.options);
    return "leftOut" in likelihood && likelihood.code === code ? likelihood : null;
  }

  private leaveOutWithoutLikelihood(): void {
    for (const row of this.included()) {
      const likelihood = rowLikelihood(row.used, row.options);
      if ("leftOut" in likelihood) row.reason = likelihood.leftOut.replace(/\.$/, "");
    }
  }

  // ---- How rows hang together

  private decideAlternatives(): void {
    const groups = new Map<string, Row[]>();
    for (const row of this.included()) {
      const label = row.record.fields.alternativesGroup?.trim();
      if (!label) continue;
      const key = JSON.stringify([row.record.citation, label.toLowerCase()]);
      groups.set(key, [...(groups.get(key) ?? []), row]);
    }
    for (const members of groups.values()) {
      if (members.length < 2) continue;
      const preferred = members.filter((row) => row.record.fields.alternativesPreferred === true);
      const [only] = preferred.length === 1 ? preferred : [];
      const label = members[0]?.record.fields.alternativesGroup?.trim() ?? "";
      const { option } = this.ask({
        kind: "alternatives",
        rows: members,
        words: `One paper gives ${members.length} answers to one question (${label}): ${members.map(named).join(", ")}. They are never multiplied.`,
        options: [
          { code: "mixture", words: "Equal mixture of all", override: false },
          ...members.map((row) => ({
            code: `one:${row.record.number}`,
            words: `One answer: ${named(row)}`,
            override: false,
          })),
        ],
        proposed: only ? `one:${only.record.number}` : "mixture",
        because: only
          ? "the authors prefer it"
          : "the authors prefer none, and an equal mixture favours none",
      });
      for (const row of members) {
        if (option === "mixture") row.mixture = label;
        else if (option !== `one:${row.record.number}`) {
          row.reason = `Alternative answer to the same question as ${option.slice("one:".length)}`;
        }
      }
    }
  }

  private decideJointInference(): void {
    const isJoint = (row: Row): boolean =>
      carriesTag(row.record.fields.methodTags, "jointInference");
    const joint = this.included().filter(isJoint);
    const others = this.included().filter((row) => !isJoint(row));
    for (const row of joint) {
      if (others.length === 0 && joint.length === 1) continue;
      const { option } = this.ask({
        kind: "jointInference",
        rows: [row],
        words: `${named(row)} is a joint inference: it contains other constraints, so it overlaps with every row.`,
        options: [
          OUT,
          { code: "keep", words: "Keep it beside the others, with a reason", override: true },
        ],
        proposed: "out",
        because: "its parts would count twice",
      });
      if (option === "out") row.reason = "Joint inference: it contains other constraints";
    }
  }

  private decideOverlaps(): void {
    // Taken once: a row that goes out meanwhile must not change what stands for its mixture.
    const units = new Map(
      this.included().map(({ record }) => [record.number, this.unit(record.number)]),
    );
    const unitOf = (number: string): string => units.get(number) ?? number;
    const overlaps = this.overlapsOfUnits();
    for (const cluster of overlapClusters(overlaps)) {
      const members = cluster.rows.map((number) => {
        const { record } = this.byNumber.get(number) as Row;
        return {
          number,
          published: record.fields.versionRead !== "preprint",
          year: record.year,
        };
      });
      const proposal = chooseRows(cluster, members);
      const codeOf = (kept: readonly string[]): string => `keep:${kept.join("+")}`;
      const sets = new Map([[codeOf(proposal.kept), proposal.kept]]);
      for (const { number } of proposal.left) {
        const apart = cluster.overlaps
          .filter(({ a, b }) => a === number || b === number)
          .flatMap(({ a, b }) => [a, b]);
        const rest = cluster.rows.filter((other) => !apart.includes(other) && other !== number);
        const kept = [number, ...independentOf(rest, cluster.overlaps, members)].sort(
          byRecordNumber,
        );
        sets.set(codeOf(kept), kept);
      }
      const wordsOf = (kept: readonly string[]): string =>
        kept.map((number) => this.unitWords(number)).join(", ");
      const { option } = this.ask({
        kind: "overlap",
        rows: this.included().filter((row) => cluster.rows.includes(unitOf(row.record.number))),
        words: `${cluster.rows.length === 2 ? "Two rows share" : `${cluster.rows.length} rows share, directly or through others,`} data: ${[...new Set(cluster.overlaps.map(({ via }) => via))].join(", ")}.`,
        options: [
          ...[...sets].map(([code, kept]) => ({
            code,
            words: `Keep ${wordsOf(kept)}`,
            override: false,
          })),
          {
            code: "all",
            words:
              cluster.rows.length === 2 ? "Keep both, with a reason" : "Keep all, with a reason",
            override: true,
          },
        ],
        proposed: codeOf(proposal.kept),
        because: proposal.words,
      });
      const kept = sets.get(option);
      if (!kept) continue;
      for (const row of this.included()) {
        const own = unitOf(row.record.number);
        if (!cluster.rows.includes(own) || kept.includes(own)) continue;
        const pair = cluster.overlaps.find(
          ({ a, b }) => (a === own && kept.includes(b)) || (b === own && kept.includes(a)),
        );
        const other = pair && (pair.a === own ? pair.b : pair.a);
        row.reason = pair ? `Shares ${pair.via} with ${other}` : "Shares data with other rows";
      }
    }
  }

  /** Rows of one mixture stand and fall together: the lowest number stands for them. */
  private unit(number: string): string {
    const row = this.byNumber.get(number);
    if (!row || row.mixture === null) return number;
    const [first = number] = this.mixtureOf(row)
      .map((member) => member.record.number)
      .sort(byRecordNumber);
    return first;
  }

  private mixtureOf(row: Row): Row[] {
    return this.included().filter(
      (other) => other.mixture === row.mixture && other.record.citation === row.record.citation,
    );
  }

  private unitWords(number: string): string {
    const row = this.byNumber.get(number) as Row;
    return row.mixture === null ? named(row) : `the mixture ${row.mixture}`;
  }

  private overlapsOfUnits(): Overlap[] {
    const isIn = (number: string): boolean => this.byNumber.get(number)?.reason === null;
    const together = (a: string, b: string): boolean =>
      this.surroundings.sets.some(({ members }) => members.includes(a) && members.includes(b));
    const pairs = new Map<string, Overlap>();
    for (const { a, b, via } of this.surroundings.overlaps) {
      if (!isIn(a) || !isIn(b) || together(a, b)) continue;
      const [one, two] = [this.unit(a), this.unit(b)].sort(byRecordNumber) as [string, string];
      if (one !== two) pairs.set(`${one}+${two}`, { a: one, b: two, via });
    }
    return [...pairs.values()];
  }

  private decideConditioned(): void {
    for (const row of [...this.included()].sort((a, b) =>
      byRecordNumber(a.record.number, b.record.number),
    )) {
      if (row.reason !== null) continue;
      const met = this.conditionsMet(row);
      if (met.length === 0) continue;
      const others = [...new Set(met.flatMap(({ rows }) => rows))];
      const { option } = this.ask({
        kind: "conditioned",
        rows: [row, ...others],
        about: `${row.record.number}|${others
          .map((other) => other.record.number)
          .sort(byRecordNumber)
          .join("+")}`,
        words: `${met.map(({ path, rows }) => `${pathWords(path)}; in the table: ${rows.map(named).join(", ")}`).join(". ")}.`,
        options: [
          { code: "out", words: `Leave ${row.record.number} out`, override: false },
          {
            code: "others",
            words: `Leave ${others.map((other) => other.record.number).join(", ")} out`,
            override: false,
          },
          { code: "keep", words: "Keep all of them, with a reason", override: true },
        ],
        proposed: "out",
        because: "the same information would count twice",
      });
      if (option === "out") {
        for (const member of row.mixture === null ? [row] : this.mixtureOf(row)) {
          member.reason = `Conditioned on data of the table: ${pathWords((met[0] as Met).path)}`;
        }
      } else if (option === "others") {
        for (const other of others) other.reason = `${row.record.number} contains it already`;
      }
    }
  }

  private conditionsMet(row: Row): Met[] {
    const paths = this.surroundings.conditions.get(row.record.number) ?? [];
    return paths.flatMap((path): Met[] => {
      const rows = this.included().filter((other) => other !== row && isConditionOf(path, other));
      return rows.length === 0 ? [] : [{ path, rows }];
    });
  }

  private decideSets(): SettledSet[] {
    const settled: SettledSet[] = [];
    for (const set of this.surroundings.sets) {
      const kept = set.members.filter((number) => this.byNumber.get(number)?.reason === null);
      if (kept.length === 0) continue;
      const whole = kept.length === set.members.length;
      if (!whole && !this.keepsPart(set, kept)) continue;
      if (kept.length < 2) continue;
      const indices = kept.map((number) => set.members.indexOf(number));
      settled.push({
        id: set.id,
        label: set.label,
        members: kept,
        rho: whole ? set.rho : marginalCorrelation(set.rho, indices),
        whole,
      });
    }
    return settled;
  }

  private keepsPart(set: TableSet, kept: readonly string[]): boolean {
    const rows = kept.map((number) => this.byNumber.get(number) as Row);
    const { option } = this.ask({
      kind: "correlatedSet",
      rows,
      about: `${set.id}|${kept.join("+")}`,
      words: `${set.label} has ${set.members.length} correlated rows, of which ${kept.length === 1 ? "one is" : `${kept.length} are`} in the table: ${kept.join(", ")}.`,
      options: [
        { code: "marginal", words: "Take the exact marginal of the part kept", override: false },
        { code: "out", words: "Leave the part out, too", override: false },
      ],
      proposed: "marginal",
      because: "dropping rows and columns of the matrix is exact",
    });
    if (option === "out") for (const row of rows) row.reason = `Part of the set ${set.label}`;
    return option !== "out";
  }

  // ---- The result

  private addCautions(): void {
    const rows = this.included();
    for (const row of rows) {
      if (row.record.fields.dataKnown === false) row.cautions.push("The data it uses are unknown");
      for (const { name, neverIndependent } of methodsOf(row.record.fields.methodTags)) {
        if (neverIndependent) row.cautions.push(`${name}: never independent of other constraints`);
      }
      const likelihood = rowLikelihood(row.used, row.options);
      if (!("leftOut" in likelihood)) {
        row.cautions.push(...likelihood.warnings.map(({ text }) => text));
      }
    }
  }

  private result(sets: readonly SettledSet[]): SettledTable {
    const setOf = new Map(sets.flatMap(({ id, members }) => members.map((one) => [one, id])));
    const mixtures = this.mixtures();
    const sizeOf = new Map(
      mixtures.flatMap(({ members }) => members.map((one) => [one, members.length])),
    );
    return {
      rows: this.rows.map((row) => ({
        number: row.record.number,
        included: row.reason === null,
        reason: row.reason,
        open: row.open,
        cautions: row.reason === null ? row.cautions : [],
        used: row.used,
        options: row.options,
        formReason: row.formReason,
        likelihood: rowLikelihood(row.used, row.options),
        weight: 1 / (sizeOf.get(row.record.number) ?? 1),
        mixture: row.reason === null ? row.mixture : null,
        set: setOf.get(row.record.number) ?? null,
      })),
      decisions: this.decisions,
      open: this.decisions.filter(({ taken }) => taken === null).length,
      mixtures,
      sets,
    };
  }

  private mixtures(): SettledMixture[] {
    const found = new Map<string, Row[]>();
    for (const row of this.included()) {
      if (row.mixture === null) continue;
      const key = JSON.stringify([row.record.citation, row.mixture.toLowerCase()]);
      found.set(key, [...(found.get(key) ?? []), row]);
    }
    return [...found.values()].map((members) => ({
      label: members[0]?.mixture ?? "",
      members: members.map((row) => row.record.number),
      standardDeviation: mixtureSd(members),
    }));
  }
}

interface Met {
  path: ConditionPath;
  rows: Row[];
}

function independentOf(
  rows: readonly string[],
  overlaps: readonly Overlap[],
  units: Parameters<typeof chooseRows>[1],
): string[] {
  const inside = overlaps.filter(({ a, b }) => rows.includes(a) && rows.includes(b));
  const clusters = overlapClusters(inside);
  const clustered = new Set(clusters.flatMap((cluster) => cluster.rows));
  return [
    ...rows.filter((number) => !clustered.has(number)),
    ...clusters.flatMap((cluster) => chooseRows(cluster, units).kept),
  ];
}

function mixtureSd(members: readonly Row[]): number | null {
  const means: number[] = [];
  const sigmas: number[] = [];
  for (const { used } of members) {
    if (!used || used.kind !== "twoSided" || used.evaluatedIn !== "linear") return null;
    if (used.value === null || used.sigmaMinus === null || used.sigmaPlus === null) return null;
    means.push(Number(used.value));
    sigmas.push((used.sigmaMinus + used.sigmaPlus) / 2);
  }
  return equalMixtureSd(means, sigmas);
}

/** Families that a kind of data, when a record is conditioned on it, contains. */
const FAMILIES_OF_KIND: Record<ConditionKind, readonly MethodFamily[]> = {
  cmb: ["cmb"],
  lymanAlpha: [
    "dampingWing",
    "darkPixels",
    "forestOpacity",
    "lineStrength",
    "luminosityFunction",
    "emitterClustering",
  ],
  // Of ultraviolet luminosity functions the registry keeps no constraint by themselves.
  luminosityFunction: [],
  twentyOneCm: ["twentyOneCm"],
};

function isConditionOf(path: ConditionPath, other: Row): boolean {
  const { number, fields } = other.record;
  if (path.through.slice(1).includes(number) || path.on === number) return true;
  if (!(CONDITION_KINDS as readonly string[]).includes(path.on)) return false;
  const families = FAMILIES_OF_KIND[path.on as ConditionKind];
  return familiesOf(fields.methodTags).some((family) => families.includes(family));
}

/** "FL-0007 is conditioned on FL-0003, which is conditioned on CMB" */
function pathWords({ through, on }: ConditionPath): string {
  const steps = [...through, conditionWord(on)];
  return steps.slice(1).reduce((words, step, index) => {
    return index === 0
      ? `${words} is conditioned on ${step}`
      : `${words}, which is conditioned on ${step}`;
  }, steps[0] ?? "");
}

function named(row: Row): string {
  return `${row.record.number} (${row.record.shortName})`;
}

function capital(words: string): string {
  return words.charAt(0).toUpperCase() + words.slice(1);
}

/**
 * The rows in as an engine's table: every likelihood with its id, mixtures and correlated sets.
 * A mixture's id is its first member's number with a plus behind it.
 */
export function tableSpecOf(table: SettledTable): TableSpec {
  const rows = table.rows.flatMap(({ number, included, likelihood }) =>
    included && !("leftOut" in likelihood) ? [{ ...likelihood, id: number }] : [],
  );
  return {
    rows,
    mixtures: table.mixtures.map(({ members }) => ({ id: `${members[0]}+`, members })),
    correlated: table.sets.map(({ id, members, rho }) => ({ id, members, rho })),
  };
}
