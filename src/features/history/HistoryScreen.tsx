import { Loading } from "@/components/feedback/Loading";
import { Screen } from "@/layout/Screen";

export function HistoryScreen() {
  return (
    <Screen title="History">
      <Loading label="Fetching the constraints" />
    </Screen>
  );
}
