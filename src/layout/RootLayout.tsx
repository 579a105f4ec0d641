import { ApolloProvider } from "@apollo/client/react";
import { Slot } from "expo-router";
import { useState } from "react";
import { createClient } from "@/apollo/client";
import { ThemeProvider } from "@/theme/ThemeProvider";
import "@/theme/global.css";

/** Providers around every route. */
export function RootLayout() {
  const [client] = useState(() => createClient());
  return (
    <ApolloProvider client={client}>
      <ThemeProvider>
        <Slot />
      </ThemeProvider>
    </ApolloProvider>
  );
}
