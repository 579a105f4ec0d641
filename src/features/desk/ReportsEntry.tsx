import { useQuery } from "@apollo/client/react";
import { View } from "react-native";

import { Card } from "@/components/Card";
import { ListRow } from "@/components/ListRow";
import { Dense, Section } from "@/components/Text";
import { waitingTime } from "@/components/when";
import { ErrorReportsDocument } from "~graphql/generated/graphql";

/** The way to what readers report, with how many wait and for how long. */
export function ReportsEntry() {
  const { data } = useQuery(ErrorReportsDocument, {
    variables: { state: "open" },
    fetchPolicy: "cache-and-network",
  });
  const open = data?.errorReports;
  return (
    <View style={{ gap: 16 }}>
      <Section>Error reports</Section>
      <Card flush>
        <View role="list" aria-label="Error reports">
          <ListRow href="/desk/reports" first>
            <Dense style={{ fontWeight: "600" }}>What readers find wrong</Dense>
            <Dense muted>{open ? waits(open) : "Read and answer"}</Dense>
          </ListRow>
        </View>
      </Card>
    </View>
  );
}

function waits(open: readonly { reportedAt: string }[]): string {
  const [oldest] = open;
  if (!oldest) return "None waits for an answer";
  const time = waitingTime(oldest.reportedAt);
  return open.length === 1
    ? `1 waits for an answer, for ${time}`
    : `${open.length} wait for an answer, the oldest for ${time}`;
}
