import { useMutation, useQuery } from "@apollo/client/react";
import { useRouter } from "expo-router";
import { useState } from "react";
import { StyleSheet, View } from "react-native";

import { userMessage } from "@/apollo/userMessage";
import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { ReleaseList } from "@/components/releases/ReleaseList";
import { Confirm } from "@/components/Sheet";
import { Dense, Section } from "@/components/Text";
import { Screen } from "@/layout/Screen";
import { space } from "@/theme/tokens";
import { CutReleaseDocument, ReleaseReadinessDocument } from "~graphql/generated/graphql";

/** A maintainer's page: what stands against the next release, its notes, and the ones before. */
export function CutReleaseScreen() {
  const { viewer, may, loading } = useSession();
  return (
    <Screen
      title="Releases"
      subtitle="Numbered snapshots of all approved records; none ever changes"
      back="/desk"
    >
      {loading ? (
        <Loading label="Fetching your account" />
      ) : may("cutRelease") ? (
        <View style={styles.all}>
          <Next />
          <View style={styles.part}>
            <Section>Cut so far</Section>
            <ReleaseList />
          </View>
        </View>
      ) : (
        <Empty
          icon="lock-outline"
          title={viewer ? "Maintainers only" : "Sign in first"}
          text="A maintainer of the registry cuts its releases."
          action={
            viewer ? (
              <Button kind="filled" label="To the desk" href="/desk" />
            ) : (
              <Button kind="filled" label="Sign in" href="/account/sign-in?next=/desk/releases" />
            )
          }
        />
      )}
    </Screen>
  );
}

function Next() {
  const router = useRouter();
  const { data, error, refetch } = useQuery(ReleaseReadinessDocument, {
    fetchPolicy: "cache-and-network",
  });
  const [notes, setNotes] = useState("");
  const [asking, setAsking] = useState(false);
  const [failure, setFailure] = useState<string | null>(null);
  const [cut, { loading }] = useMutation(CutReleaseDocument, {
    update: (cache) => void cache.evict({ id: "ROOT_QUERY", fieldName: "releases" }),
  });
  const ready = data?.releaseReadiness;
  if (error && !ready) return <Failed error={error} onRetry={() => void refetch()} />;
  if (!ready) return <Loading label="Checking every approved record" rows={2} />;
  const number = (ready.latest ?? 0) + 1;
  async function confirm() {
    setAsking(false);
    setFailure(null);
    try {
      const { data: answer } = await cut({ variables: { notes: notes.trim() } });
      const result = answer?.cutRelease;
      if (result?.__typename === "Release") router.push(`/releases/${result.number}` as never);
      else {
        setFailure(result?.message ?? "No release was cut. Try again.");
        void refetch();
      }
    } catch (problem) {
      setFailure(userMessage(problem));
    }
  }
  return (
    <View style={styles.part}>
      <Section>{`Release ${number}`}</Section>
      {ready.blockers.length > 0 ? (
        <Notice grade="mustAnswer" title="What stands against it">
          <View role="list" style={styles.part}>
            {ready.blockers.map((blocker) => (
              <View key={blocker} role="listitem">
                <Dense>{blocker}</Dense>
              </View>
            ))}
          </View>
        </Notice>
      ) : (
        <Dense>{`${ready.records} approved records are valid and none is being read.`}</Dense>
      )}
      <Field
        label="Notes: what is new in it"
        value={notes}
        onChangeText={setNotes}
        multiline
        maxLength={5000}
      />
      {failure ? <Notice grade="error">{failure}</Notice> : null}
      <Button
        label={`Cut release ${number}`}
        kind="filled"
        icon="source-branch"
        busy={loading}
        disabledBecause={
          ready.blockers.length > 0
            ? "Settle what stands against it first."
            : notes.trim() === ""
              ? "Write its notes."
              : undefined
        }
        onPress={() => setAsking(true)}
      />
      <Confirm
        visible={asking}
        title={`Cut release ${number}?`}
        text="It freezes every approved record as it stands now, for ever. A release can't be taken back."
        confirmLabel="Cut it"
        onConfirm={() => void confirm()}
        onCancel={() => setAsking(false)}
      />
    </View>
  );
}

const styles = StyleSheet.create({ all: { gap: space.l }, part: { gap: space.s } });
