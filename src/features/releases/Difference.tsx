import { useQuery } from "@apollo/client/react";
import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { Choice } from "@/components/Choice";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Block, Caption, Dense, Mono, Section } from "@/components/Text";
import { space } from "@/theme/tokens";
import { ReleaseDifferenceDocument } from "~graphql/generated/graphql";
import type { FieldName } from "~shared/statement/fields";
import { FIELD_NAMES } from "~shared/statement/words";

/** How a release differs from another one, by record. */
export function Difference({ number, others }: { number: number; others: readonly number[] }) {
  const choices = others.filter((other) => other !== number);
  const [with_, setWith] = useState<number | null>(
    () => choices.find((other) => other < number) ?? choices[0] ?? null,
  );
  if (with_ === null) return null;
  return (
    <View style={styles.all}>
      <Section>Difference</Section>
      <View style={styles.choice}>
        <Choice
          label="Against"
          value={String(with_)}
          options={choices.map((other) => ({ value: String(other), label: `Release ${other}` }))}
          onChange={(value) => setWith(value === null ? with_ : Number(value))}
        />
      </View>
      <Against from={Math.min(with_, number)} to={Math.max(with_, number)} />
    </View>
  );
}

function Against({ from, to }: { from: number; to: number }) {
  const { data, error, loading, refetch } = useQuery(ReleaseDifferenceDocument, {
    variables: { from, to },
  });
  const difference = data?.releaseDifference;
  if (error && !difference) return <Failed error={error} onRetry={() => void refetch()} />;
  if (!difference) return loading ? <Loading label="Comparing the releases" rows={3} /> : null;
  const { added, removed, changed } = difference;
  if (added.length + removed.length + changed.length === 0) {
    return <Dense muted>They hold the same.</Dense>;
  }
  return (
    <View style={styles.all}>
      <Records title={`Added by release ${to}`} records={added} />
      <Records title={`No longer in release ${to}`} records={removed} />
      {changed.length > 0 ? (
        <View style={styles.part}>
          <Block level={2}>{`Changed by release ${to}`}</Block>
          <View role="list" style={styles.part}>
            {changed.map(({ number, before, quotable, shortName, changes }) => (
              <View key={number} role="listitem">
                <Dense>
                  <Mono>{before === quotable ? quotable : `${before} to ${quotable}`}</Mono>
                  {`, ${shortName}`}
                </Dense>
                {changes.map(({ field, before: old, after }) => (
                  <Caption key={field} muted>
                    {`${FIELD_NAMES[field as FieldName] ?? "State"}: ${old ?? "open"}, then ${after ?? "open"}`}
                  </Caption>
                ))}
              </View>
            ))}
          </View>
        </View>
      ) : null}
    </View>
  );
}

function Records({
  title,
  records,
}: {
  title: string;
  records: readonly { number: string; quotable: string; shortName: string }[];
}) {
  if (records.length === 0) return null;
  return (
    <View style={styles.part}>
      <Block level={2}>{title}</Block>
      <View role="list" style={styles.tight}>
        {records.map(({ number, quotable, shortName }) => (
          <View key={number} role="listitem">
            <Dense>
              <Mono>{quotable}</Mono>
              {`, ${shortName}`}
            </Dense>
          </View>
        ))}
      </View>
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.m },
  part: { gap: space.s },
  tight: { gap: space.xxs },
  choice: { maxWidth: 320 },
});
