import { type ReactNode, useState } from "react";
import { View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Empty } from "@/components/feedback/Empty";
import { Loading } from "@/components/feedback/Loading";
import { FilePick } from "@/components/FilePick";
import { Notice } from "@/components/Notice";
import { StepBar } from "@/components/StepBar";
import { Body, Caption, Dense } from "@/components/Text";
import { Screen } from "@/layout/Screen";

import { MatchStep } from "./MatchStep";
import { PreviewStep } from "./PreviewStep";
import { type PickedFile, useImport } from "./useImport";

const STEPS = [
  { key: "files", label: "Files" },
  { key: "match", label: "Match" },
  { key: "preview", label: "Preview" },
  { key: "done", label: "Drafts" },
] as const;
type StepKey = (typeof STEPS)[number]["key"];

/** A group's hand-kept list becomes drafts: all good rows at once, or none. */
export function ImportScreen() {
  const { viewer, loading, hasRole } = useSession();
  if (loading || !viewer || !hasRole("contributor")) {
    return (
      <Screen title="Import a file" back="/desk">
        {loading ? (
          <Loading label="Fetching your account" />
        ) : (
          <Empty
            icon="lock-outline"
            title={viewer ? "Contributors import files" : "Sign in first"}
            text={
              viewer
                ? "Your account has no contributor role yet. The desk says how to get it."
                : "Imported drafts belong to an account."
            }
            action={
              viewer ? (
                <Button kind="filled" label="To the desk" href="/desk" />
              ) : (
                <Button
                  kind="filled"
                  label="Sign in"
                  href="/account/sign-in?next=%2Fdesk%2Fimport"
                />
              )
            }
          />
        )}
      </Screen>
    );
  }
  return <Import />;
}

function Import() {
  const work = useImport();
  const [csv, setCsv] = useState<PickedFile | null>(null);
  const [bib, setBib] = useState<PickedFile | null>(null);
  const [at, setAt] = useState<StepKey>("files");
  const step: StepKey = work.done ? "done" : at;
  const { preview } = work;

  const read = async () => {
    if (csv && bib && (await work.read(csv, bib))) setAt("match");
  };

  let content: ReactNode = null;
  let footer: ReactNode;
  if (step === "files") {
    content = (
      <View style={{ gap: 16, maxWidth: 640 }}>
        <Body>
          Bring the list as it is: a CSV file with one constraint in each row, and a .bib file with
          the papers its keys name. You match its columns and words to the record&apos;s fields, see
          every row, and then the good ones become drafts together.
        </Body>
        <FilePick label="Pick the CSV file" accept=".csv,.txt,.tsv" onPick={setCsv} />
        <FilePick label="Pick the .bib file" accept=".bib,.txt" onPick={setBib} />
      </View>
    );
    footer = (
      <Button
        kind="filled"
        label="Read the files"
        busy={work.busy}
        disabledBecause={
          csv && bib
            ? undefined
            : csv
              ? "Pick the .bib file too."
              : bib
                ? "Pick the CSV file too."
                : "Pick both files."
        }
        onPress={() => void read()}
      />
    );
  } else if (step === "match" && preview) {
    content = (
      <MatchStep
        preview={preview}
        match={work.match}
        onColumn={work.setColumn}
        onWord={work.setWord}
      />
    );
  } else if (step === "preview" && preview) {
    content = <PreviewStep preview={preview} />;
  } else if (work.done) {
    content = <Created done={work.done} />;
  } else if (work.busy) {
    content = <Loading label="Reading the files" rows={6} />;
  }
  if ((step === "match" || step === "preview") && preview) {
    footer = (
      <View style={{ gap: 8 }}>
        <View role="status">
          <Caption>
            {work.busy
              ? "Reading the list again"
              : `${preview.good} good, ${preview.refused} refused, ${preview.alreadyHere} already here`}
          </Caption>
        </View>
        <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 12 }}>
          <Button
            kind="outline"
            label="Back"
            onPress={() => setAt(step === "match" ? "files" : "match")}
          />
          {step === "match" ? (
            <Button kind="filled" label="See the rows" onPress={() => setAt("preview")} />
          ) : (
            <Button
              kind="filled"
              label={preview.good === 1 ? "Create one draft" : `Create ${preview.good} drafts`}
              busy={work.busy}
              disabledBecause={
                preview.good === 0 ? "No row of this list is new and good." : undefined
              }
              onPress={() => void work.run()}
            />
          )}
        </View>
      </View>
    );
  }

  return (
    <Screen
      key={step}
      title="Import a file"
      subtitle="A list of your group"
      back="/desk"
      footer={footer}
    >
      <View style={{ gap: 24, maxWidth: 1040 }}>
        <StepBar
          label="Steps of the import"
          steps={STEPS.map(({ key, label }) => ({
            key,
            label,
            closed: key === "done" || step === "done" || (key !== "files" && !preview),
          }))}
          current={step}
          onGo={(key) => setAt(key as StepKey)}
        />
        {work.problem ? (
          <Notice
            grade="error"
            action={
              step === "files" ? undefined : (
                <Button kind="tonal" icon="refresh" label="Try again" onPress={work.again} />
              )
            }
          >
            {work.problem}
          </Notice>
        ) : null}
        {content}
      </View>
    </Screen>
  );
}

function Created({ done }: { done: NonNullable<ReturnType<typeof useImport>["done"]> }) {
  const { created, refused, alreadyHere, submissionIds } = done;
  return (
    <View style={{ gap: 16, maxWidth: 640 }}>
      <Notice
        grade="done"
        title={created === 1 ? "One draft is on your desk" : `${created} drafts are on your desk`}
      >
        {`${refused} ${refused === 1 ? "row was" : "rows were"} refused and ${alreadyHere} ${alreadyHere === 1 ? "was" : "were"} already here. Nothing else was changed.`}
      </Notice>
      <Dense>
        Each draft still asks for what the list did not hold. Complete and submit them one by one.
      </Dense>
      <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 12 }}>
        {submissionIds[0] ? (
          <Button
            kind="filled"
            label="Open the first draft"
            href={`/desk/submit/${submissionIds[0]}`}
          />
        ) : null}
        <Button kind="outline" label="To the desk" href="/desk" />
      </View>
      {submissionIds.length > 1 ? (
        <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 4 }}>
          {submissionIds.map((id, index) => (
            <Button key={id} kind="text" label={`Draft ${index + 1}`} href={`/desk/submit/${id}`} />
          ))}
        </View>
      ) : null}
    </View>
  );
}
