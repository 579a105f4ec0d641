import { View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Card } from "@/components/Card";
import { ListRow } from "@/components/ListRow";
import { Dense, Section } from "@/components/Text";

/** What a maintainer keeps. */
export function MaintainerDesk() {
  const { demonstration } = useSession();
  return (
    <View style={{ gap: 16 }}>
      <Section>Maintaining</Section>
      <Card flush>
        <View role="list" aria-label="Maintaining">
          <ListRow href="/desk/people" first>
            <Dense style={{ fontWeight: "600" }}>People</Dense>
            <Dense muted>Find a person, grant and revoke roles</Dense>
          </ListRow>
          <ListRow href="/desk/vocabulary" first={false}>
            <Dense style={{ fontWeight: "600" }}>Method vocabulary</Dense>
            <Dense muted>Methods, their families, definitions and cautions</Dense>
          </ListRow>
          <ListRow href="/desk/releases" first={false}>
            <Dense style={{ fontWeight: "600" }}>Releases</Dense>
            <Dense muted>Cut a numbered snapshot of all approved records</Dense>
          </ListRow>
          <ListRow href="/desk/log" first={false}>
            <Dense style={{ fontWeight: "600" }}>Event log</Dense>
            <Dense muted>Who did what, and when; each event chained to the one before</Dense>
          </ListRow>
          {demonstration ? (
            <ListRow href="/desk/mail" first={false}>
              <Dense style={{ fontWeight: "600" }}>Caught mail</Dense>
              <Dense muted>Mails the demonstration would have sent</Dense>
            </ListRow>
          ) : null}
        </View>
      </Card>
    </View>
  );
}
