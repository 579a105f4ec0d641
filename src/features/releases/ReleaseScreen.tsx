import { useQuery } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Choice } from "@/components/Choice";
import { DefinitionList } from "@/components/DefinitionList";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Notice } from "@/components/Notice";
import { Body, Dense, Mono, Section } from "@/components/Text";
import { dateTime } from "@/components/when";
import { Screen } from "@/layout/Screen";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { useColors } from "@/theme/ThemeProvider";
import { radius, space } from "@/theme/tokens";
import { ReleaseByNumberDocument, type ReleaseByNumberQuery } from "~graphql/generated/graphql";
import { NOTICE_WORDS } from "~shared/review/notice";

import { Difference } from "./Difference";

type Release = NonNullable<ReleaseByNumberQuery["release"]>;

const FILES = [
  ["csv", "CSV"],
  ["json", "JSON"],
  ["ecsv", "ECSV"],
  ["vot", "VOTable"],
  ["txt", "Machine-readable table"],
  ["bib", "BibTeX of the papers"],
] as const;

/** A release: what it holds, its files, how to cite it, what was recorded since, and how it differs. */
export function ReleaseScreen() {
  const { number } = useLocalSearchParams<{ number: string }>();
  const wanted = /^\d{1,6}$/.test(number) ? Number(number) : 0;
  const { data, error, loading, refetch } = useQuery(ReleaseByNumberDocument, {
    variables: { number: wanted },
  });
  const release = data?.release;
  return (
    <Screen
      title={`Release ${number}`}
      subtitle={release ? `${release.records} records, ${dateTime(release.cutAt)}` : undefined}
      back="/tables"
    >
      {release ? (
        <View style={styles.all}>
          <ReleaseView release={release} others={data.releases.map((one) => one.number)} />
        </View>
      ) : error ? (
        <Failed error={error} onRetry={() => void refetch()} />
      ) : loading ? (
        <Loading label="Fetching the release" rows={4} />
      ) : (
        <Empty
          icon="table"
          title="No release of this number"
          text="Releases count from 1; a maintainer cuts them."
          action={<Button label="All releases" kind="tonal" href="/tables" />}
        />
      )}
    </Screen>
  );
}

function ReleaseView({ release, others }: { release: Release; others: readonly number[] }) {
  const wide = useLayoutClass() === "wide";
  const path = `/api/releases/${release.number}`;
  return (
    <>
      <Since release={release} />
      <View style={wide ? styles.columns : styles.all}>
        <View style={[wide && styles.main, styles.part]}>
          <Card>
            <View style={styles.part}>
              <Body>{release.notes}</Body>
              <DefinitionList
                items={[
                  { term: "Cut", value: `${dateTime(release.cutAt)} by ${release.cutBy}` },
                  {
                    term: "Registry as of",
                    value: `event ${release.lastEvent.sequence}, ${dateTime(release.lastEvent.at)}`,
                  },
                  { term: "Licence", value: release.licence },
                  { term: "Digest", value: <Mono style={styles.mono}>{release.digest}</Mono> },
                ]}
              />
            </View>
          </Card>
        </View>
        <View style={[wide && styles.side, styles.part]}>
          <Section>Download</Section>
          <View style={styles.buttons}>
            {FILES.map(([kind, name], index) => (
              <Button
                key={kind}
                label={name}
                kind={index === 0 ? "filled" : "outline"}
                icon="tray-arrow-down"
                href={`${path}.${kind}`}
              />
            ))}
          </View>
          <Dense muted>Its bytes never change. Anyone can fetch it, without an account.</Dense>
          <Button
            label="Build a table over it"
            kind="tonal"
            icon="table-large-plus"
            href={`/tables/new?release=${release.number}`}
          />
        </View>
      </View>
      <Cite release={release} />
      <Difference number={release.number} others={others} />
    </>
  );
}

/** Errata and the like that were recorded after the release was cut. */
function Since({ release: { notices } }: { release: Release }) {
  if (notices.length === 0) return null;
  return (
    <Notice grade="caution" title="Recorded since this release was cut">
      <View role="list" style={styles.list}>
        {notices.map(({ number, notice }) => (
          <View key={notice.id} role="listitem">
            <Dense>
              <Mono>{number}</Mono>
              {`: ${NOTICE_WORDS[notice.kind].toLowerCase()}${notice.replacedBy ? ` by ${notice.replacedBy}` : ""}, ${dateTime(notice.at)}. ${notice.reason}`}
            </Dense>
          </View>
        ))}
      </View>
    </Notice>
  );
}

const STYLES = [
  ["bibtex", "BibTeX", "citation.bib"],
  ["csl", "CSL-JSON", "citation.json"],
  ["cff", "CITATION.cff", "cff"],
] as const;

function Cite({ release }: { release: Release }) {
  const colors = useColors();
  const [style, setStyle] = useState<(typeof STYLES)[number][0]>("bibtex");
  const ending = STYLES.find(([key]) => key === style)?.[2] ?? "cff";
  return (
    <View style={styles.part}>
      <Section>Cite it</Section>
      <View style={styles.choice}>
        <Choice
          label="As"
          value={style}
          options={STYLES.map(([value, label]) => ({ value, label }))}
          onChange={(value) => setStyle((value as typeof style | null) ?? "bibtex")}
        />
      </View>
      <View
        role="group"
        aria-label="Citation of the release"
        style={[styles.code, { backgroundColor: colors.sunken, borderColor: colors.hairline }]}
      >
        <Mono style={styles.mono}>{release.citation[style]}</Mono>
      </View>
      <View style={styles.buttons}>
        <Button
          label="Download it"
          icon="tray-arrow-down"
          href={`/api/releases/${release.number}.${ending}`}
        />
      </View>
      <Dense muted>Cite the original papers too: inclusion is no endorsement.</Dense>
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.l },
  part: { gap: space.s },
  list: { gap: space.xs },
  columns: { flexDirection: "row", gap: space.l, alignItems: "flex-start" },
  main: { flex: 1, minWidth: 0 },
  side: { width: 400 },
  buttons: { flexDirection: "row", flexWrap: "wrap", gap: space.s },
  choice: { maxWidth: 320 },
  code: { borderRadius: radius.chip, borderWidth: 1, padding: space.s },
  mono: { fontSize: 13, lineHeight: 20 },
});
