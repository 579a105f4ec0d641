import type { ReactNode } from "react";
import { StyleSheet, View } from "react-native";
import { usePathname } from "expo-router";
import Icon, { type IconName } from "@/components/Icon";
import { Press } from "@/components/Press";
import { Label } from "@/components/Text";
import { web } from "@/components/web";
import { useColors } from "@/theme/ThemeProvider";
import { fonts, radius, space, widths } from "@/theme/tokens";
import { useLayoutClass } from "./useLayoutClass";

interface Place {
  name: string;
  href: string;
  icon: IconName;
}

const PLACES: readonly Place[] = [
  { name: "History", href: "/", icon: "chart-bell-curve-cumulative" },
  { name: "Constraints", href: "/constraints", icon: "format-list-bulleted" },
  { name: "Tables", href: "/tables", icon: "table" },
  { name: "Desk", href: "/desk", icon: "tray-full" },
];

const ACCOUNT: Place = { name: "Account", href: "/account", icon: "account-circle-outline" };

function isAt(path: string, place: Place): boolean {
  // A release is one of the tables in all but its address.
  if (place.href === "/tables" && path.startsWith("/releases")) return true;
  // Named data are looked at from the constraints that use them.
  if (place.href === "/constraints" && /^\/data(\/|$)/.test(path)) return true;
  return place.href === "/" ? path === "/" : path.startsWith(place.href);
}

/** The frame of every page: bottom bar on phone and tablet, rail from 1100 wide. */
export function Shell({ children }: { children: ReactNode }) {
  const colors = useColors();
  const wide = useLayoutClass() === "wide";
  const path = usePathname();
  // A form with steps has its own lower edge; its way back leads to the desk and the bar.
  const atWork = useLayoutClass() === "compact" && /^\/desk\/(submit|review)\//.test(path);
  const skip = (
    <a href="#content" className="fogline-skip">
      Skip to the content
    </a>
  );
  if (wide) {
    return (
      <View style={[styles.wide, { backgroundColor: colors.paper }]}>
        {skip}
        <View
          role="navigation"
          aria-label="Main"
          style={[styles.rail, { backgroundColor: colors.surface, borderColor: colors.hairline }]}
        >
          <View style={styles.logo}>
            <Label style={[styles.logotype, { color: colors.primary }]}>Fogline</Label>
          </View>
          {PLACES.map((place) => (
            <RailItem key={place.href} place={place} here={isAt(path, place)} />
          ))}
          <View style={styles.foot}>
            <RailItem place={ACCOUNT} here={isAt(path, ACCOUNT)} />
          </View>
        </View>
        <View style={styles.fill}>{children}</View>
      </View>
    );
  }
  return (
    <View style={[styles.fill, { backgroundColor: colors.paper }]}>
      {skip}
      <View style={styles.fill}>{children}</View>
      {atWork ? null : (
        <View
          role="navigation"
          aria-label="Main"
          style={[styles.bar, { backgroundColor: colors.surface, borderColor: colors.hairline }]}
        >
          {PLACES.map((place) => (
            <View key={place.href} style={styles.barItem}>
              <RailItem place={place} here={isAt(path, place)} narrow />
            </View>
          ))}
        </View>
      )}
    </View>
  );
}

function RailItem({
  place,
  here,
  narrow = false,
}: {
  place: Place;
  here: boolean;
  /** In the bar, where four of them share the width of a small phone. */
  narrow?: boolean;
}) {
  const colors = useColors();
  return (
    <Press
      href={place.href}
      attributes={{ "aria-current": here ? "page" : undefined }}
      style={[styles.item, narrow && styles.narrow]}
    >
      <View style={styles.itemContent}>
        <View style={[styles.itemIcon, here && { backgroundColor: colors.petrolTint }]}>
          <Icon name={place.icon} color={here ? colors.primary : colors.muted} />
        </View>
        <Label style={[styles.itemWord, { color: here ? colors.ink : colors.muted }]}>
          {place.name}
        </Label>
      </View>
    </Press>
  );
}

const styles = StyleSheet.create({
  wide: { flex: 1, flexDirection: "row", minHeight: 0 },
  fill: { flex: 1, minWidth: 0, minHeight: 0 },
  rail: { width: widths.rail, borderRightWidth: 1, alignItems: "center", gap: space.xs },
  logo: { height: 68, justifyContent: "center" },
  logotype: { fontFamily: fonts.serif, fontSize: 20, lineHeight: 28 },
  foot: { marginTop: "auto", paddingBottom: space.s, alignItems: "center" },
  bar: {
    borderTopWidth: 1,
    flexDirection: "row",
    paddingBottom: "env(safe-area-inset-bottom)" as never,
    ...web({}),
  },
  barItem: { flex: 1, alignItems: "center", paddingVertical: space.xs },
  item: { minWidth: 88, borderRadius: radius.card, alignItems: "center" },
  narrow: { minWidth: 72 },
  itemContent: { alignItems: "center", paddingVertical: 2 },
  itemIcon: {
    width: 60,
    height: 32,
    borderRadius: 16,
    alignItems: "center",
    justifyContent: "center",
  },
  itemWord: { fontSize: 13, lineHeight: 20 },
});
