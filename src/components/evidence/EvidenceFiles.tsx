import { useQuery } from "@apollo/client/react";
import { StyleSheet, View } from "react-native";

import { Card, Divider } from "@/components/Card";
import { Failed } from "@/components/feedback/Failed";
import { Block, Dense } from "@/components/Text";
import { space } from "@/theme/tokens";
import { EvidenceDocument } from "~graphql/generated/graphql";

import { EvidenceFile } from "./EvidenceFile";

/**
 * The files kept with a revision, as far as the viewer may see them; nothing where there are none.
 *
 * @param number - FL-0042.3.
 */
export function EvidenceFiles({ number, level = 3 }: { number: string; level?: 2 | 3 }) {
  const { data, error, refetch } = useQuery(EvidenceDocument, {
    variables: { number },
    fetchPolicy: "cache-and-network",
  });
  const files = data?.evidence ?? [];
  if (error && !data) return <Failed error={error} onRetry={() => void refetch()} />;
  if (files.length === 0) return null;
  const closed = files.every(({ address }) => !address);
  return (
    <View style={styles.all} role="region" aria-label="Evidence">
      <Block level={level}>Evidence</Block>
      {closed ? (
        <Dense muted>
          Kept for the editors and not passed on, since papers are under copyright. The digest says
          which file it is.
        </Dense>
      ) : null}
      <Card style={styles.list}>
        {files.map((file, index) => (
          <View key={file.id ?? file.digest} style={styles.list}>
            {index > 0 ? <Divider /> : null}
            <EvidenceFile file={file} />
          </View>
        ))}
      </Card>
    </View>
  );
}

const styles = StyleSheet.create({ all: { gap: space.xs }, list: { gap: space.m } });
