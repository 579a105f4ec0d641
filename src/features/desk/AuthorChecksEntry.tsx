import { useQuery } from "@apollo/client/react";
import { View } from "react-native";

import { Card } from "@/components/Card";
import { ListRow } from "@/components/ListRow";
import { Dense, Section } from "@/components/Text";
import { waitingTime } from "@/components/when";
import { AuthorChecksDocument } from "~graphql/generated/graphql";

/** The way to what authors say of records of their papers, with how many comments wait. */
export function AuthorChecksEntry() {
  const { data } = useQuery(AuthorChecksDocument, {
    variables: { text: null },
    fetchPolicy: "cache-and-network",
  });
  const waiting = data?.authorChecks.filter(
    ({ state, verdict }) => state === "answered" && verdict === "comments",
  );
  const oldest = waiting?.[0]?.answeredAt;
  return (
    <View style={{ gap: 16 }}>
      <Section>Author checks</Section>
      <Card flush>
        <View role="list" aria-label="Author checks">
          <ListRow href="/desk/author-checks" first>
            <Dense style={{ fontWeight: "600" }}>What authors say of their records</Dense>
            <Dense muted>
              {oldest
                ? `${waiting.length === 1 ? "Comments of one author wait" : `Comments of ${waiting.length} authors wait`}, for ${waitingTime(oldest)}`
                : "No comments wait"}
            </Dense>
          </ListRow>
        </View>
      </Card>
    </View>
  );
}
