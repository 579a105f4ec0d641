import { View } from "react-native";

import { useSession } from "@/apollo/useSession";
import { Button } from "@/components/Button";
import { Caption } from "@/components/Text";
import { reportCountWords } from "~shared/review/errorReport";

/** How many readers reported an error in a record, and whether they were answered; not what they say. */
export function ReportCount({
  number,
  count,
}: {
  number: string;
  count: { open: number; answered: number };
}) {
  const { may } = useSession();
  const words = reportCountWords(count.open, count.answered);
  if (words === null) return null;
  return (
    <View style={{ flexDirection: "row", flexWrap: "wrap", alignItems: "center", columnGap: 8 }}>
      <Caption>{words}</Caption>
      {may("readErrorReports") ? (
        <Button kind="text" label="Read them" href={`/desk/reports?q=${number}`} />
      ) : null}
    </View>
  );
}
