import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { StatusPill } from "@/components/StatusPill";
import { Block, Caption, Dense } from "@/components/Text";
import { space } from "@/theme/tokens";
import type { ConstraintByNumberQuery, LifePartsFragment } from "~graphql/generated/graphql";

import { chainEnd, relationWord } from "./life";

type RecordData = NonNullable<ConstraintByNumberQuery["constraint"]>;

/** What a record is to others, both ways; what it is conditioned on, through chains; shared data. */
export function RelationsPart({
  record,
  life,
}: {
  record: Pick<RecordData, "number" | "sharesDataWith" | "alternatives">;
  /** Null while it is not known. */
  life: LifePartsFragment | null;
}) {
  const relations = (life?.relations ?? []).map((relation) => ({
    ...relation,
    word: relationWord(relation),
  }));
  const links = [
    ...record.sharesDataWith.map((link) => ({ ...link, word: `Shares ${link.via}` })),
    ...record.alternatives
      .filter(({ number }) => number !== record.number)
      .map((link) => ({
        ...link,
        word: link.preferred
          ? "Alternative answer, preferred by the authors"
          : "Alternative answer",
      })),
  ];
  const chains = life?.conditionChains ?? [];
  return (
    <View style={styles.all}>
      <Block>Relations</Block>
      {relations.length + links.length + chains.length === 0 ? (
        <Dense muted>None on record.</Dense>
      ) : null}
      {relations.map((relation) => (
        <Row key={`${relation.word}-${relation.number}`} {...relation} />
      ))}
      {chains.length > 0 ? (
        <View style={styles.chains}>
          <Caption muted>Contains already</Caption>
          {chains.map((chain) => (
            <Dense key={`${chain.through.join("-")}-${chain.on}`}>{chainEnd(chain)}</Dense>
          ))}
        </View>
      ) : null}
      {[...new Set(links.map(({ word }) => word))].map((word) => (
        <View key={word}>
          <Caption muted>{word}</Caption>
          {links
            .filter((link) => link.word === word)
            .map(({ number, shortName }) => (
              <Row key={number} number={number} shortName={shortName} />
            ))}
        </View>
      ))}
    </View>
  );
}

function Row({
  word,
  shortName,
  number,
  state,
}: {
  /** Left out where it stands over several. */
  word?: string;
  shortName: string;
  number: string;
  state?: LifePartsFragment["relations"][number]["state"];
}) {
  return (
    <View style={styles.row}>
      <View style={styles.grow}>
        {word ? <Caption muted>{word}</Caption> : null}
        <View style={styles.line}>
          <Dense>{shortName}</Dense>
          {state && state !== "current" ? <StatusPill state={state} /> : null}
        </View>
      </View>
      <Button label={number} kind="text" href={`/constraints/${number}`} />
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.xs },
  chains: { gap: space.xxs },
  row: { flexDirection: "row", alignItems: "center", gap: space.s },
  line: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: space.xs },
  grow: { flex: 1, minWidth: 0 },
});
