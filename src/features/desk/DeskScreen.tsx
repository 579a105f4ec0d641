import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Loading } from "@/components/feedback/Loading";
import { MySets } from "@/components/setQueue/MySets";
import { SetQueue } from "@/components/setQueue/SetQueue";
import { Body, Dense, Section } from "@/components/Text";
import { Screen } from "@/layout/Screen";
import { View } from "react-native";

import { AuthorChecksEntry } from "./AuthorChecksEntry";
import { MaintainerDesk } from "./MaintainerDesk";
import { MySubmissions } from "./MySubmissions";
import { Queue } from "./Queue";
import { ReportsEntry } from "./ReportsEntry";

/** The working place of each role: what waits for this person stands first. */
export function DeskScreen() {
  const { viewer, loading, hasRole, may } = useSession();
  const roles = (["contributor", "editor", "maintainer"] as const).filter(hasRole);
  return (
    <Screen
      title="Desk"
      subtitle={viewer ? viewer.nameOnPapers : "Submitting and reviewing constraints"}
    >
      <View style={{ gap: 32, maxWidth: 1040 }}>
        {loading ? (
          <Loading label="Fetching your desk" />
        ) : !viewer ? (
          <Welcome />
        ) : (
          <>
            {hasRole("contributor") ? <MySubmissions /> : null}
            {hasRole("contributor") ? <MySets /> : null}
            {hasRole("editor") ? <Queue /> : null}
            {hasRole("editor") ? <SetQueue /> : null}
            {hasRole("editor") ? <AuthorChecksEntry /> : null}
            {may("readErrorReports") ? <ReportsEntry /> : null}
            {hasRole("maintainer") ? <MaintainerDesk /> : null}
            {hasRole("contributor") ? null : <BecomeContributor alone={roles.length === 0} />}
          </>
        )}
      </View>
    </Screen>
  );
}

/** What the desk is, for nobody in particular. */
function Welcome() {
  return (
    <View style={{ gap: 16, maxWidth: 640 }}>
      <Body>
        A constraint comes into the registry in two readings. A contributor types what a paper
        prints, with its citation. An editor reads the paper again without seeing that, and the two
        are compared field by field before the record is approved.
      </Body>
      <Body>Reading, plotting and downloading need no account.</Body>
      <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 12 }}>
        <Button kind="filled" icon="login" label="Sign in" href="/account/sign-in?next=%2Fdesk" />
        <Button kind="outline" label="Register" href="/account/register?next=%2Fdesk" />
      </View>
    </View>
  );
}

function BecomeContributor({ alone }: { alone: boolean }) {
  return (
    <View style={{ gap: 12, maxWidth: 640 }}>
      <Section>{alone ? "Submit constraints" : "Submitting"}</Section>
      <Card style={{ gap: 12 }}>
        <Body>
          Contributors submit constraints. A maintainer of this registry grants the role: write to
          one of them from the address of this account, and say which papers you would bring.
        </Body>
        <Dense muted>
          Until then you can save fitting tables, and anyone can download everything that is
          approved.
        </Dense>
        <View style={{ flexDirection: "row", flexWrap: "wrap", gap: 12 }}>
          <Button kind="tonal" label="See the constraints" href="/constraints" />
          <Button kind="text" label="Build a fitting table" href="/tables/new" />
        </View>
      </Card>
    </View>
  );
}
