import { View } from "react-native";

import { CheckRow } from "@/components/CheckRow";
import { Caption, Section } from "@/components/Text";
import type { ReviewPartsFragment } from "~graphql/generated/graphql";

/** What the editor confirms beyond the numbers; kept with the reading, point by point. */
export function Checklist({
  points,
  onTick,
}: {
  points: ReviewPartsFragment["checklist"];
  onTick: (codes: string[]) => void;
}) {
  if (points.length === 0) return null;
  const ticked = points.filter((point) => point.ticked).map(({ code }) => code);
  return (
    <View style={{ gap: 4 }} role="group" aria-label="Checklist">
      <Section>Checklist</Section>
      <Caption>{`${ticked.length} of ${points.length} ticked. All are, before it can be approved.`}</Caption>
      {points.map(({ code, text, ticked: done }) => (
        <CheckRow
          key={code}
          label={text}
          checked={done}
          onChange={(checked) =>
            onTick(checked ? [...ticked, code] : ticked.filter((one) => one !== code))
          }
        />
      ))}
    </View>
  );
}
