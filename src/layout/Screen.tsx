import type { ReactNode } from "react";
import { ScrollView, StyleSheet, View } from "react-native";
import Head from "expo-router/head";
import { useSession } from "@/apollo/useSession";
import { IconButton } from "@/components/Button";
import { Caption, Dense, Title } from "@/components/Text";
import { web } from "@/components/web";
import { Ground } from "@/theme/Ground";
import { useColors } from "@/theme/ThemeProvider";
import { space, target, widths } from "@/theme/tokens";
import { ConnectionBar } from "./ConnectionBar";
import { DemonstrationLabel } from "./DemonstrationLabel";
import { useLayoutClass } from "./useLayoutClass";

/**
 * A page: its head (title, actions, the demonstration label, on narrow screens the way to the
 * account), its content, and on wide screens an aside at the right, which else follows the content.
 */
export function Screen({
  title,
  subtitle,
  documentTitle,
  back,
  actions,
  aside,
  list,
  footer,
  children,
  scroll = true,
  padded = true,
}: {
  title: string;
  subtitle?: ReactNode;
  /** Title of the window where it differs from the heading. */
  documentTitle?: string;
  back?: string;
  actions?: ReactNode;
  aside?: ReactNode;
  /** Column at the left of a wide screen, 320 wide; left out on narrower ones. */
  list?: ReactNode;
  /** Stays at the lower edge while the content scrolls. */
  footer?: ReactNode;
  children: ReactNode;
  scroll?: boolean;
  padded?: boolean;
}) {
  const colors = useColors();
  const layout = useLayoutClass();
  const { demonstration } = useSession();
  const phone = layout === "compact";
  const wide = layout === "wide";
  const sides = !padded ? 0 : phone ? space.m : wide && aside ? space.l : space.xl;
  const headSides = phone ? space.m : wide && aside ? space.l : space.xl;

  const content = (
    <View
      style={[
        styles.content,
        { paddingHorizontal: sides, paddingTop: padded ? space.xs : 0 },
        scroll ? { paddingBottom: space.xxl } : styles.fill,
      ]}
    >
      {children}
      {aside && !wide ? <View style={styles.below}>{aside}</View> : null}
    </View>
  );
  return (
    <View style={styles.page}>
      <Head>
        <title>{`${documentTitle ?? title} · Fogline`}</title>
      </Head>
      {list && wide ? (
        <View
          style={[styles.list, { borderColor: colors.hairline, backgroundColor: colors.surface }]}
        >
          <Ground on="surface">{list}</Ground>
        </View>
      ) : null}
      <View
        role="main"
        nativeID="content"
        style={styles.main}
        {...web({ tabIndex: -1, className: undefined })}
      >
        <View
          style={[
            styles.head,
            phone ? styles.headPhone : styles.headWide,
            { paddingHorizontal: headSides },
          ]}
        >
          {back ? (
            <View style={styles.back}>
              <IconButton icon="arrow-left" label="Back" href={back} />
            </View>
          ) : null}
          <View style={[styles.titles, !phone && styles.titlesWide]}>
            <Title>{title}</Title>
            {subtitle === undefined ? null : typeof subtitle === "string" ? (
              phone ? (
                <Caption>{subtitle}</Caption>
              ) : (
                <Dense muted>{subtitle}</Dense>
              )
            ) : (
              subtitle
            )}
          </View>
          {demonstration && !phone ? <DemonstrationLabel strip={false} /> : null}
          {actions ? <View style={styles.actions}>{actions}</View> : null}
          {wide ? null : (
            <IconButton icon="account-circle-outline" label="Account" href="/account" />
          )}
        </View>
        {demonstration && phone ? <DemonstrationLabel strip /> : null}
        <ConnectionBar />
        {scroll ? (
          <ScrollView
            style={styles.fill}
            contentContainerStyle={styles.scrolled}
            keyboardShouldPersistTaps="handled"
          >
            {content}
          </ScrollView>
        ) : (
          content
        )}
        {footer ? (
          <View
            style={[
              styles.footer,
              {
                backgroundColor: colors.surface,
                borderColor: colors.hairline,
                paddingHorizontal: headSides,
              },
            ]}
          >
            <Ground on="surface">{footer}</Ground>
          </View>
        ) : null}
      </View>
      {aside && wide ? (
        <View
          role="complementary"
          aria-label={`Beside: ${title}`}
          style={[styles.aside, { borderColor: colors.hairline, backgroundColor: colors.surface }]}
        >
          <ScrollView style={styles.fill}>
            <Ground on="surface">{aside}</Ground>
          </ScrollView>
        </View>
      ) : null}
    </View>
  );
}

const styles = StyleSheet.create({
  page: { flex: 1, flexDirection: "row", minWidth: 0, minHeight: 0 },
  list: { width: widths.list, borderRightWidth: 1, minHeight: 0 },
  main: { flex: 1, minWidth: 0, minHeight: 0 },
  head: { flexDirection: "row", alignItems: "center", gap: space.xs },
  headPhone: { minHeight: 64, paddingVertical: space.xs },
  headWide: { minHeight: 72, paddingVertical: space.s, flexWrap: "wrap" },
  back: { marginLeft: -space.s },
  titles: { flex: 1, minWidth: 0 },
  titlesWide: {
    flexDirection: "row",
    alignItems: "baseline",
    flexWrap: "wrap",
    columnGap: space.m,
    minHeight: target,
    paddingTop: 4,
  },
  actions: { flexDirection: "row", alignItems: "center", gap: space.xxs },
  fill: { flex: 1, minHeight: 0 },
  scrolled: { flexGrow: 1 },
  content: { flexGrow: 1, gap: space.m, width: "100%" },
  below: { paddingTop: space.m },
  footer: { borderTopWidth: 1, paddingVertical: space.s },
  aside: { width: widths.inspector, borderLeftWidth: 1, minHeight: 0 },
});
