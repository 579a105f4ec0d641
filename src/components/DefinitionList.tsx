import type { ReactNode } from "react";
import { useColors } from "@/theme/ThemeProvider";
import { fonts } from "@/theme/tokens";
import { Dense } from "./Text";

/** Terms and their values, a real dl. */
export function DefinitionList({
  items,
}: {
  items: readonly { term: string; value: ReactNode }[];
}) {
  const colors = useColors();
  return (
    <dl
      style={{
        display: "grid",
        gridTemplateColumns: "minmax(96px, max-content) minmax(0, 1fr)",
        columnGap: 24,
        rowGap: 6,
        margin: 0,
        fontFamily: fonts.sans,
        fontSize: 14,
        lineHeight: "20px",
        color: colors.ink,
      }}
    >
      {items.map(({ term, value }) => [
        <dt key={`${term}-term`} style={{ color: colors.muted, maxWidth: 160 }}>
          {term}
        </dt>,
        <dd key={`${term}-value`} style={{ margin: 0, minWidth: 0, overflowWrap: "anywhere" }}>
          {typeof value === "string" ? <Dense>{value}</Dense> : value}
        </dd>,
      ])}
    </dl>
  );
}
