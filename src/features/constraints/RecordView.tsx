import { useQuery } from "@apollo/client/react";
import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Failed } from "@/components/feedback/Failed";
import { StatementCurve } from "@/components/statement/StatementCurve";
import { AuthorChecks } from "@/components/authorCheck/AuthorChecks";
import { Button } from "@/components/Button";
import { Card, Divider } from "@/components/Card";
import { CitationLine } from "@/components/CitationLine";
import { CiteSheet } from "@/components/CiteSheet";
import { RecordSets } from "@/components/correlatedSet/RecordSets";
import { DefinitionList } from "@/components/DefinitionList";
import { Marker } from "@/components/Marker";
import { EvidenceFiles } from "@/components/evidence/EvidenceFiles";
import { NotationText } from "@/components/NotationText";
import { Notice } from "@/components/Notice";
import { RecordTitle } from "@/components/RecordTitle";
import { StatusPill } from "@/components/StatusPill";
import { Block, Caption, Dense, Label, Mono, Section } from "@/components/Text";
import { dateTime } from "@/components/when";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { useColors } from "@/theme/ThemeProvider";
import { space } from "@/theme/tokens";
import { RecordLifeDocument, type ConstraintByNumberQuery } from "~graphql/generated/graphql";
import { familyOf, methodsOf } from "~shared/methods/vocabulary";
import { asUsed, type AsUsed } from "~shared/statement/asUsed";
import type { ConstraintFields, FieldName } from "~shared/statement/fields";
import { notationAsPrinted, notationAsUsed } from "~shared/statement/notation";
import { hasBestValue } from "~shared/statement/relevant";
import { conditionWord, FIELD_NAMES, fieldText, levelPhrase } from "~shared/statement/words";

import { DataUsedPart } from "./DataUsedPart";
import { HappenedPart } from "./HappenedPart";
import { LifeNotices } from "./LifeNotices";
import { LifeSheet, type LifeTask } from "./LifeSheet";
import { MethodsPart } from "./MethodsPart";
import { RelationsPart } from "./RelationsPart";
import { ReportCount } from "./ReportCount";
import { ReportSheet } from "./ReportSheet";
import { RevisionCredits } from "./RevisionCredits";

type RecordData = NonNullable<ConstraintByNumberQuery["constraint"]>;

/** One record whole: as printed beside as used, provenance, data, relations, revisions. */
export function RecordView({ record }: { record: RecordData }) {
  const [citing, setCiting] = useState(false);
  const [reporting, setReporting] = useState(false);
  const layout = useLayoutClass();
  const columns = layout !== "compact";
  // Terms and their values need more than a third of a tablet.
  const beside = layout === "wide";
  const { fields, citation } = record;
  const used = asUsed(fields);
  const family = familyOf(fields.methodTags);
  const lifeQuery = useQuery(RecordLifeDocument, {
    variables: { number: record.number },
    fetchPolicy: "cache-and-network",
  });
  const life = lifeQuery.data?.recordLife ?? null;
  const mayChange = useSession().may("changeRecordLife");
  const [task, setTask] = useState<LifeTask | null>(null);
  return (
    <View style={styles.all}>
      <LifeNotices
        notices={life?.notices ?? []}
        onTakeBack={mayChange ? (notice) => setTask({ kind: "takeBack", notice }) : undefined}
      />
      <View style={styles.head}>
        <View style={styles.line}>
          <Mono style={styles.number}>{record.quotable}</Mono>
          <StatusPill state={record.state} />
          <Caption muted>
            revision {record.ordinal}, approved {dateTime(record.approvedAt)}
          </Caption>
        </View>
        <View style={styles.titleLine}>
          {family ? <Marker family={family} hollow={!hasBestValue(fields.kind)} size={22} /> : null}
          <View style={styles.grow}>
            <Section level={2} style={styles.title}>
              <RecordTitle fields={fields} />
            </Section>
            <CitationLine citation={citation} />
          </View>
        </View>
        <View style={styles.line}>
          {record.state === "withdrawn" ? null : (
            <Button
              label="Add to a table"
              kind="filled"
              icon="table-plus"
              href={`/tables/new?with=${record.number}`}
            />
          )}
          <Button label="Cite" icon="format-quote-close" onPress={() => setCiting(true)} />
        </View>
      </View>
      <Card flush>
        <View style={columns ? styles.parts : undefined}>
          <AsPrinted fields={fields} wide={columns} />
          <Rule upright={columns} />
          <UsedPart used={used} fields={fields} wide={columns} />
          <Rule upright={columns} />
          <View style={[styles.part, columns && styles.third]}>
            <Block>Likelihood</Block>
            <StatementCurve fields={fields} />
            {fields.kind === "curve" && used?.curve ? (
              <Button
                label="Curve as CSV"
                kind="text"
                icon="tray-arrow-down"
                href={`/api/constraints/${record.number}/curve.csv`}
              />
            ) : null}
          </View>
        </View>
      </Card>
      <Cautions record={record} />
      <RecordSets number={record.number} citationId={citation.id} fields={fields} />
      <View style={beside ? styles.columns : styles.stack}>
        <View style={[styles.column, beside && styles.third]}>
          <Block>Provenance</Block>
          <Provenance record={record} />
          {citation.doi ? (
            <Button
              label={`doi ${citation.doi}`}
              kind="text"
              icon="open-in-new"
              href={`https://doi.org/${citation.doi}`}
            />
          ) : null}
          {citation.arxiv ? (
            <Button
              label={`arXiv ${citation.arxiv}`}
              kind="text"
              icon="open-in-new"
              href={`https://arxiv.org/abs/${citation.arxiv}`}
            />
          ) : null}
          <EvidenceFiles number={record.quotable} />
        </View>
        <View style={[styles.column, beside && styles.third]}>
          <MethodsPart tags={fields.methodTags} />
          <DataUsedPart record={record} />
          <RelationsPart record={record} life={life} />
          {lifeQuery.error && !life ? (
            <Failed error={lifeQuery.error} onRetry={() => void lifeQuery.refetch()} />
          ) : null}
        </View>
        <View style={[styles.column, beside && styles.third]}>
          <Revisions record={record} />
          <Button
            label="Report an error"
            kind="text"
            icon="alert-circle-outline"
            onPress={() => setReporting(true)}
          />
          <AuthorChecks
            number={record.number}
            quotable={record.quotable}
            marks={record.authorChecks}
          />
          <ReportCount number={record.number} count={record.errorReports} />
          {life ? (
            <HappenedPart
              life={life}
              onChange={mayChange ? () => setTask({ kind: "record" }) : undefined}
            />
          ) : null}
        </View>
      </View>
      <CiteSheet
        visible={citing}
        onClose={() => setCiting(false)}
        quotable={record.quotable}
        citation={citation}
      />
      <LifeSheet
        task={task}
        number={record.number}
        state={record.state}
        onClose={() => setTask(null)}
        onDone={() => {
          setTask(null);
          void lifeQuery.refetch();
        }}
      />
      <ReportSheet visible={reporting} onClose={() => setReporting(false)} number={record.number} />
    </View>
  );
}

function Rule({ upright }: { upright: boolean }) {
  const colors = useColors();
  return upright ? <View style={{ width: 1, backgroundColor: colors.hairline }} /> : <Divider />;
}

function AsPrinted({ fields, wide }: { fields: ConstraintFields; wide: boolean }) {
  const colors = useColors();
  const words = [
    levelPhrase(fields.level, fields.levelPercent),
    hasBestValue(fields.kind) ? fieldText("estimator", fields).toLowerCase() : "",
    fields.quantity === "neutralFraction" && fields.weighting
      ? fields.weighting === "unknown"
        ? "weighting unknown"
        : `${fields.weighting}-weighted`
      : "",
  ].filter(Boolean);
  return (
    <View style={[styles.part, wide && styles.third]}>
      <Block>As printed</Block>
      <NotationText notation={notationAsPrinted(fields)} size="stated" tail={false} />
      <Dense>{words.join(", ")}</Dense>
      {fields.printedText ? (
        <View style={[styles.quote, { borderColor: colors.hairline }]}>
          <Dense muted>“{fields.printedText}”</Dense>
        </View>
      ) : null}
    </View>
  );
}

function UsedPart({
  used,
  fields,
  wide,
}: {
  used: AsUsed | null;
  fields: ConstraintFields;
  wide: boolean;
}) {
  return (
    <View style={[styles.part, wide && styles.third]}>
      <View style={styles.line}>
        <Block>As used</Block>
        {used?.derived ? <Caption muted>derived</Caption> : null}
      </View>
      {used === null ? (
        <Dense>
          {fields.species === "electron"
            ? "Not used by a likelihood: whether the electrons of helium are counted is unknown."
            : "Not used by a likelihood: the statement has no number to use."}
        </Dense>
      ) : (
        <>
          <NotationText notation={notationAsUsed(used)} size="stated" />
          {used.steps.length === 0 ? (
            <Dense muted>Taken as it is printed.</Dense>
          ) : (
            <ol style={{ margin: 0, paddingLeft: 20 }}>
              {used.steps.map(({ code, text }) => (
                <li key={code} style={{ paddingBottom: 4, fontSize: 14 }}>
                  <Dense muted>{text}</Dense>
                </li>
              ))}
            </ol>
          )}
        </>
      )}
    </View>
  );
}

/** Which of the alternatives its authors prefer. */
function preferredWords({ number, alternatives }: RecordData): string {
  const preferred = alternatives.find((link) => link.preferred);
  if (!preferred) return "The authors prefer none of them.";
  return preferred.number === number
    ? "The authors prefer this one."
    : `The authors prefer ${preferred.number}.`;
}

function Cautions({ record }: { record: RecordData }) {
  const { fields, sharesDataWith, alternatives } = record;
  const others = alternatives.filter(({ number }) => number !== record.number);
  const methods = methodsOf(fields.methodTags);
  const systematic = methods.map(({ caution }) => caution);
  const lines = [
    `Model-dependent. ${systematic.join(" ")}`.trim(),
    methods.some(({ neverIndependent }) => neverIndependent)
      ? "Never independent: its result contains or assumes others."
      : "",
    sharesDataWith.length > 0
      ? `Shares data with ${sharesDataWith.length === 1 ? "another record" : `${sharesDataWith.length} other records`}: a table should use one.`
      : "",
    fields.dataKnown === false ? "The paper does not name its data: unknown is not none." : "",
    others.length > 0
      ? `One of ${others.length + 1} answers of this paper to the same question: take one or their equal mixture, never multiply them. ${preferredWords(record)}`
      : "",
    fields.level === "notStated" ? "The paper states no level: a table has to choose one." : "",
    fields.conditionedOn.length > 0
      ? `Conditioned on ${fields.conditionedOn.map(conditionWord).join(", ")}: don't combine it with the same data again.`
      : "",
    fields.weighting === "mass" ? "Mass-weighted: not converted to a volume average." : "",
    fields.quantity === "opticalDepth" || fields.quantity === "opticalDepthRange"
      ? `An optical depth comes from a history family, with helium and weighting assumed${fields.historyAssumed ? ` (here: ${fields.historyAssumed})` : ""}.`
      : "",
    fields.versionRead === "preprint" ? "Read from a preprint." : "",
    fields.readOffFigure
      ? `Read off a figure${fields.digitizingError ? `, digitizing error ${fields.digitizingError}` : ""}.`
      : "",
  ].filter(Boolean);
  return (
    <Notice grade="caution">
      {lines.map((line) => (
        <Dense key={line}>{line}</Dense>
      ))}
    </Notice>
  );
}

const PROVENANCE: readonly FieldName[] = [
  "versionRead",
  "preprintVersion",
  "place",
  "page",
  "zRole",
  "estimator",
  "priorForm",
  "priorVariable",
  "priorRange",
  "modelTags",
  "cosmicVariance",
  "conditionedOn",
  "helium",
  "historyAssumed",
  "heliumAssumed",
  "truncationAssumed",
  "curveTable",
  "curveColumn",
  "furtherIntervals",
  "readOffFigure",
  "digitizingError",
  "remark",
];

function Provenance({ record }: { record: RecordData }) {
  const stated = PROVENANCE.filter((name) => {
    const value = record.fields[name];
    return Array.isArray(value) ? value.length > 0 : value !== null && value !== "";
  });
  return (
    <DefinitionList
      items={[
        ...stated.map((name) => ({
          term: FIELD_NAMES[name],
          value: fieldText(name, record.fields),
        })),
        { term: "Submitted by", value: record.submittedBy },
        { term: "Second reading", value: record.readBy },
        { term: "Citation key", value: record.citation.key },
      ]}
    />
  );
}

function Revisions({ record }: { record: RecordData }) {
  return (
    <View style={styles.stackSmall}>
      <Block>Revisions</Block>
      {[...record.revisions]
        .sort((a, b) => b.ordinal - a.ordinal)
        .map(({ ordinal, state, at, changes, enteredBy, readBy }) => (
          <View key={ordinal} style={styles.revision}>
            <View style={styles.line}>
              <Label>Revision {ordinal}</Label>
              <Caption muted>{dateTime(at)}</Caption>
              <StatusPill state={state} />
            </View>
            <RevisionCredits enteredBy={enteredBy} readBy={readBy} />
            {changes.map(({ field, before, after }) => (
              <Dense key={field}>
                {FIELD_NAMES[field as FieldName] ?? field}: was {before || "open"}, now{" "}
                {after || "open"}
              </Dense>
            ))}
          </View>
        ))}
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.l },
  head: { gap: space.s },
  line: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: space.s },
  titleLine: { flexDirection: "row", alignItems: "flex-start", gap: space.s },
  title: { fontSize: 24, lineHeight: 32 },
  number: { fontSize: 15 },
  grow: { flex: 1, minWidth: 0 },
  parts: { flexDirection: "row" },
  part: { padding: space.m, gap: space.xs },
  third: { flex: 1, minWidth: 0 },
  quote: { borderLeftWidth: 2, paddingLeft: space.s, marginTop: space.xxs },
  columns: { flexDirection: "row", gap: space.xl },
  stack: { gap: space.l },
  column: { gap: space.s },
  stackSmall: { gap: space.xs },
  revision: { gap: space.xxs, paddingBottom: space.xs },
});
