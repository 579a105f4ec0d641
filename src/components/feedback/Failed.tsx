import { View } from "react-native";
import { userMessage } from "@/apollo/userMessage";
import { Button } from "../Button";
import { Empty } from "./Empty";

/** What did not arrive, in one sentence the reader can act on, with a retry. */
export function Failed({
  error,
  onRetry,
  title = "This did not arrive",
}: {
  error: unknown;
  onRetry?: () => void;
  title?: string;
}) {
  return (
    <View role="alert">
      <Empty
        icon="cloud-off-outline"
        warm
        title={title}
        text={userMessage(error)}
        action={
          onRetry ? (
            <Button label="Try again" kind="filled" icon="refresh" onPress={onRetry} />
          ) : undefined
        }
      />
    </View>
  );
}
