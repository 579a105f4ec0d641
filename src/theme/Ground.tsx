import { createContext, type ReactNode, useContext } from "react";
import { useColors } from "./ThemeProvider";

const GroundContext = createContext<"paper" | "surface">("paper");

/** Says what its content stands on; the label of a field takes that colour. */
export function Ground({ on, children }: { on: "paper" | "surface"; children: ReactNode }) {
  return <GroundContext.Provider value={on}>{children}</GroundContext.Provider>;
}

/** Colour of the ground. */
export function useGround(): string {
  const colors = useColors();
  return colors[useContext(GroundContext)];
}
