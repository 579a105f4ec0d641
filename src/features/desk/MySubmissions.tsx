import { useQuery } from "@apollo/client/react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Section } from "@/components/Text";
import { MyDeskDocument } from "~graphql/generated/graphql";

import { MyGroup, newestOf } from "./MyRows";

/** So many of a kind stand on the desk; what came back is shown whole. */
const SHOWN = 3;

/** A contributor's work: what came back stands first. */
export function MySubmissions() {
  const { data, loading, error, refetch } = useQuery(MyDeskDocument, {
    fetchPolicy: "cache-and-network",
  });
  const all = data?.mySubmissions ?? [];
  // A returned revision that was answered is represented by its answer, whatever became of that.
  const returned = newestOf(all).filter(({ state }) => state === "returned");
  const drafts = all.filter(({ state }) => state === "draft");
  const under = all.filter(({ state }) => state === "submitted" || state === "inReview");
  const approved = newestOf(all.filter(({ state }) => state === "approved"));

  return (
    <View style={{ gap: 16 }}>
      <View
        style={{
          flexDirection: "row",
          flexWrap: "wrap",
          alignItems: "center",
          justifyContent: "space-between",
          gap: 12,
        }}
      >
        <Section>My constraints</Section>
        <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 8, maxWidth: "100%" }}>
          <Button
            kind="outline"
            icon="file-upload-outline"
            label="Import a file"
            href="/desk/import"
          />
          <Button kind="filled" icon="plus" label="New constraint" href="/desk/submit/new" />
        </View>
      </View>
      {loading && !data ? <Loading label="Fetching your constraints" /> : null}
      {error && !data ? <Failed error={error} onRetry={() => void refetch()} /> : null}
      {data && all.length === 0 ? (
        <Card>
          <Empty
            icon="pencil-outline"
            title="Nothing yet"
            text="Start with a paper's BibTeX, or bring a whole list of your group as CSV and .bib."
            action={<Button kind="tonal" label="New constraint" href="/desk/submit/new" />}
          />
        </Card>
      ) : null}
      <MyGroup title="Returned to you" rows={returned} />
      <MyGroup title="Drafts" rows={drafts} most={SHOWN} more="/desk/mine?show=draft" />
      <MyGroup title="With the editors" rows={under} most={SHOWN} more="/desk/mine?show=waiting" />
      <MyGroup title="Approved" rows={approved} most={SHOWN} more="/desk/mine?show=approved" />
      {all.length > SHOWN ? (
        <View style={{ flexDirection: "row" }}>
          <Button kind="outline" icon="magnify" label="Search my constraints" href="/desk/mine" />
        </View>
      ) : null}
    </View>
  );
}
