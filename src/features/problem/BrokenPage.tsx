import { View } from "react-native";
import { Button } from "@/components/Button";
import { Empty } from "@/components/feedback/Empty";
import { ThemeProvider, useColors } from "@/theme/ThemeProvider";

/** Stands in for a page that failed while it was drawn. */
export function BrokenPage({ error, retry }: { error: Error; retry: () => Promise<void> }) {
  return (
    <ThemeProvider>
      <Broken error={error} retry={retry} />
    </ThemeProvider>
  );
}

function Broken({ error, retry }: { error: Error; retry: () => Promise<void> }) {
  const colors = useColors();
  return (
    <View role="main" style={{ flex: 1, justifyContent: "center", backgroundColor: colors.paper }}>
      <Empty
        icon="alert-outline"
        warm
        level={1}
        title="This page could not be drawn"
        text={`Saved drafts are safe. Try again; if it happens once more, tell the maintainers this: “${error.message}”`}
        action={
          <View style={{ flexDirection: "row", gap: 12, flexWrap: "wrap" }}>
            <Button label="Try again" kind="filled" icon="refresh" onPress={() => void retry()} />
            <Button
              label="Reload the page"
              kind="outline"
              onPress={() => globalThis.location?.reload()}
            />
          </View>
        }
      />
    </View>
  );
}
