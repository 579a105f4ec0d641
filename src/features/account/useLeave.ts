import { useApolloClient } from "@apollo/client/react";
import { useRouter } from "expo-router";

/** Goes to the first page as nobody: nothing of this person's desk stays in the browser's memory. */
export function useLeave(): () => Promise<void> {
  const client = useApolloClient();
  const router = useRouter();
  return async () => {
    await client.resetStore().catch(() => undefined);
    router.replace("/");
  };
}
