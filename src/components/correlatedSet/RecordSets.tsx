import { useQuery } from "@apollo/client/react";
import { StyleSheet, View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Block, Caption, Dense } from "@/components/Text";
import { space } from "@/theme/tokens";
import { SetsOfRecordDocument } from "~graphql/generated/graphql";
import { whyNotMember } from "~shared/correlatedSet/members";
import type { ConstraintFields } from "~shared/statement/fields";

import { memberLabel, SetMatrix } from "./SetMatrix";

/**
 * The correlated sets that a record is part of, with their matrices, on the record's page. Without
 * one, a contributor is offered to start it, where the record could stand in one.
 */
export function RecordSets({
  number,
  citationId,
  fields,
}: {
  number: string;
  citationId: string;
  fields: ConstraintFields;
}) {
  const { hasRole } = useSession();
  const { data } = useQuery(SetsOfRecordDocument, { variables: { member: number } });
  const sets = data?.correlatedSets ?? [];
  if (sets.length === 0) {
    if (!data || !hasRole("contributor") || whyNotMember(fields) !== null) return null;
    return (
      <View style={styles.line}>
        <Button
          kind="text"
          icon="plus"
          label="Its paper prints a matrix: add a correlated set"
          href={`/desk/sets/new?paper=${citationId}&with=${number}`}
        />
      </View>
    );
  }
  return (
    <>
      {sets.map((set) => (
        <Card key={set.number} style={styles.card}>
          <View style={styles.line}>
            <Block>{`Correlated set: ${set.label ?? set.number}`}</Block>
            <Button kind="text" label={set.number} href={`/sets/${set.number}`} />
          </View>
          <Dense>
            Use all of its records or none, or a part by its exact marginal: χ² = tᵀ ρ⁻¹ t over the
            residuals t in sigma, never each one by itself.
          </Dense>
          <SetMatrix set={set} />
          <View style={styles.line}>
            <Caption>The others:</Caption>
            {set.members
              .filter((member) => member.number !== number)
              .map((member) => (
                <Button
                  key={member.number}
                  kind="text"
                  label={`${member.number}, ${memberLabel(member)}`}
                  href={`/constraints/${member.number}`}
                />
              ))}
          </View>
        </Card>
      ))}
    </>
  );
}

const styles = StyleSheet.create({
  card: { gap: space.s },
  line: { flexDirection: "row", flexWrap: "wrap", alignItems: "center", gap: space.xs },
});
