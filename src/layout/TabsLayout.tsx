import { Slot } from "expo-router";
import { Shell } from "./Shell";

export function TabsLayout() {
  return (
    <Shell>
      <Slot />
    </Shell>
  );
}
