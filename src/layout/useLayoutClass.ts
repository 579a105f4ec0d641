import { useWindowDimensions } from "react-native";
import { widths } from "@/theme/tokens";

export type LayoutClass = "compact" | "medium" | "wide";

/** Width class of the window: phone, tablet, wide. Screens ask this, never the platform. */
export function useLayoutClass(): LayoutClass {
  const { width } = useWindowDimensions();
  if (width < widths.medium) return "compact";
  return width < widths.wide ? "medium" : "wide";
}
