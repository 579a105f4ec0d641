import { ApolloProvider } from "@apollo/client/react";
import { Slot } from "expo-router";
import { useState } from "react";
import { createClient } from "@/apollo/client";
import { ThemeProvider } from "@/theme/ThemeProvider";
import "@/theme/global.css";
import { SessionDocument } from "~graphql/generated/graphql";

/** A client that asks for the session, and with it the method vocabulary, before any screen asks for more. */
function startClient() {
  const client = createClient();
  // A failure is told by the screen that asks for the same.
  client.query({ query: SessionDocument }).catch(() => undefined);
  return client;
}

/** Providers around every route. */
export function RootLayout() {
  const [client] = useState(startClient);
  return (
    <ApolloProvider client={client}>
      <ThemeProvider>
        <Slot />
      </ThemeProvider>
    </ApolloProvider>
  );
}
