import { useMutation } from "@apollo/client/react";
import { useState } from "react";
import { View } from "react-native";

import { Button } from "@/components/Button";
import { Field } from "@/components/Field";
import { Notice } from "@/components/Notice";
import { TagField } from "@/components/TagField";
import { Dense, Section } from "@/components/Text";
import { UpdateProfileDocument, type ViewerPartsFragment } from "~graphql/generated/graphql";

import { Form } from "./AccountForm";
import { useOutcome } from "./useOutcome";

/** Who one is on papers, and what the public reads of it. */
export function ProfileForm({ viewer }: { viewer: Omit<ViewerPartsFragment, "__typename"> }) {
  const [nameOnPapers, setName] = useState(viewer.nameOnPapers);
  const [furtherNames, setFurtherNames] = useState<string[]>(viewer.furtherNames);
  const [orcid, setOrcid] = useState(viewer.orcid ?? "");
  const [update] = useMutation(UpdateProfileDocument);
  const outcome = useOutcome<{ __typename: "Viewer" }>(["nameOnPapers", "furtherNames", "orcid"]);
  const send = () =>
    outcome.run(
      async () =>
        (
          await update({
            variables: { nameOnPapers, furtherNames, orcid: orcid.trim() || null },
          })
        ).data?.updateProfile as never,
    );
  return (
    <View style={{ gap: 16 }}>
      <Section>Profile</Section>
      <Form
        label="Profile"
        onSubmit={() => void send()}
        problem={outcome.problem}
        problemField={outcome.problemField}
      >
        <Field
          name="nameOnPapers"
          label="Name as on papers"
          value={nameOnPapers}
          onChangeText={setName}
          autoComplete="name"
          hint="It stands beside what you submit and read."
          error={outcome.at("nameOnPapers")}
        />
        <TagField
          label="Further names on papers"
          values={furtherNames}
          onChange={setFurtherNames}
          separator={null}
          hint="Under which you have published too. As an editor you are kept off those papers; nobody else sees them."
          error={outcome.at("furtherNames")}
        />
        <Field
          name="orcid"
          label="ORCID"
          value={orcid}
          onChangeText={setOrcid}
          hint="Four groups of four digits, or leave it empty."
          error={outcome.at("orcid")}
          onSubmit={() => void send()}
        />
        <Button
          kind="tonal"
          label="Save the profile"
          busy={outcome.busy}
          onPress={() => void send()}
        />
        {outcome.good ? <Notice grade="done">The profile is saved.</Notice> : null}
      </Form>
      {viewer.roles.includes("contributor") || viewer.roles.includes("editor") ? (
        <View>
          <Dense muted>
            What you enter and read is credited to you by name, in public: on each record, and on a
            page of your own that lists it with your ORCID once the first of it is approved.
          </Dense>
          <View style={{ marginLeft: -12 }}>
            <Button kind="text" label="See your public page" href={`/people/${viewer.id}`} />
          </View>
        </View>
      ) : null}
    </View>
  );
}
