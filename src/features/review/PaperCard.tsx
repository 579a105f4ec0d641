import { View } from "react-native";

import { Button } from "@/components/Button";
import { Card, Divider } from "@/components/Card";
import { CitationLine } from "@/components/CitationLine";
import Icon from "@/components/Icon";
import { Body, Caption, Label } from "@/components/Text";
import { useColors } from "@/theme/ThemeProvider";
import type { QueueItemPartsFragment } from "~graphql/generated/graphql";
import { VERSION_WORDS } from "~shared/statement/words";

function paperAddress({ doi, arxiv }: QueueItemPartsFragment["citation"]): string | null {
  if (doi) return `https://doi.org/${doi}`;
  return arxiv ? `https://arxiv.org/abs/${arxiv}` : null;
}

/** The paper to read and the place in it. */
export function PaperCard({ item }: { item: QueueItemPartsFragment }) {
  const colors = useColors();
  const { citation, place, page, versionRead } = item;
  const address = paperAddress(citation);
  const where = [place, page ? `page ${page}` : null].filter(Boolean).join(", ");
  return (
    <Card style={{ gap: 12 }}>
      <View style={{ gap: 4 }}>
        <Label>{citation.title}</Label>
        <CitationLine citation={citation} />
      </View>
      <Divider />
      <View style={{ flexDirection: "row", alignItems: "center", flexWrap: "wrap", gap: 8 }}>
        <Icon name="map-marker-outline" color={colors.ink} />
        <View style={{ flex: 1, minWidth: 120 }}>
          <Body style={{ fontWeight: "600" }}>{where || "No place is given"}</Body>
          <Caption>{versionRead ? VERSION_WORDS[versionRead] : "Version not given"}</Caption>
        </View>
        {address ? <Button kind="text" icon="open-in-new" label="Paper" href={address} /> : null}
      </View>
      {citation.doi ? <Caption>{`doi ${citation.doi}`}</Caption> : null}
    </Card>
  );
}
