import { useQuery } from "@apollo/client/react";
import { useLocalSearchParams } from "expo-router";
import { useEffect } from "react";
import { StyleSheet, View } from "react-native";

import { Button } from "@/components/Button";
import { Card } from "@/components/Card";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { Block, Caption, Dense } from "@/components/Text";
import { Screen } from "@/layout/Screen";
import { useColors } from "@/theme/ThemeProvider";
import { space } from "@/theme/tokens";
import { MethodVocabularyDocument } from "~graphql/generated/graphql";
import { filterToQuery } from "~shared/filter/address";
import { currentTag, FAMILY_NAMES } from "~shared/methods/vocabulary";

import { FamilyHead, byFamily, constraintWords, type KeptMethod } from "./families";

/** What each method of the registry means, and its usual systematic; one may be named in the address. */
export function MethodsScreen() {
  const { method: asked } = useLocalSearchParams<{ method?: string }>();
  const { data, loading, error, refetch } = useQuery(MethodVocabularyDocument, {
    fetchPolicy: "cache-and-network",
  });
  const methods = data?.methodVocabulary;
  // A retired tag leads to what took it over.
  const shown = methods && asked ? (currentTag(asked)?.tag ?? null) : null;
  useEffect(() => {
    if (shown !== null) document.getElementById(idOf(shown))?.scrollIntoView({ block: "center" });
  }, [shown]);
  return (
    <Screen
      title="Methods"
      subtitle="How the constraints were inferred, and what to be careful about"
      back="/constraints"
    >
      <View style={styles.all}>
        {error && !methods ? (
          <Failed error={error} onRetry={() => void refetch()} />
        ) : !methods ? (
          loading ? (
            <Loading label="Fetching the methods" rows={6} />
          ) : null
        ) : methods.length === 0 ? (
          <Card>
            <Empty
              title="No method yet"
              text="A maintainer of the registry adds the methods that records can name."
              action={<Button kind="tonal" label="All constraints" href="/constraints" />}
            />
          </Card>
        ) : (
          byFamily(methods).map(({ family, members }) => (
            <View key={family} style={styles.family}>
              <FamilyHead family={family} />
              <Card flush>
                <View role="list" aria-label={FAMILY_NAMES[family]}>
                  {members.map((method, index) => (
                    <Method
                      key={method.tag}
                      method={method}
                      first={index === 0}
                      marked={method.tag === shown}
                      former={methods.filter(
                        ({ tag, retiredInto }) =>
                          retiredInto !== null && currentTag(tag)?.tag === method.tag,
                      )}
                    />
                  ))}
                </View>
              </Card>
            </View>
          ))
        )}
      </View>
    </Screen>
  );
}

const idOf = (tag: string): string => `method-${tag}`;

function Method({
  method,
  first,
  marked,
  former,
}: {
  method: KeptMethod;
  first: boolean;
  marked: boolean;
  /** Retired methods that it took over. */
  former: readonly KeptMethod[];
}) {
  const colors = useColors();
  const { tag, name, definition, caution, neverIndependent, aliases, constraintCount } = method;
  const words = [...aliases, ...former.map((other) => other.name)];
  return (
    <View
      role="listitem"
      id={idOf(tag)}
      style={[
        styles.method,
        {
          borderTopWidth: first ? 0 : 1,
          borderColor: colors.hairline,
          backgroundColor: marked ? colors.petrolTint : undefined,
        },
      ]}
    >
      <Block>{name}</Block>
      <Dense>{definition}</Dense>
      <Dense muted>Caution: {caution}</Dense>
      {neverIndependent ? (
        <Dense muted>Never independent: its results contain or assume others.</Dense>
      ) : null}
      {words.length > 0 ? <Caption>Also met as {words.join(", ")}</Caption> : null}
      {constraintCount > 0 ? (
        <View style={styles.link}>
          <Button
            kind="text"
            label={constraintWords(constraintCount)}
            accessibilityLabel={`${constraintWords(constraintCount)} by ${name}`}
            href={`/constraints${filterToQuery({ tags: [tag] })}`}
          />
        </View>
      ) : (
        <Caption>No constraint yet</Caption>
      )}
    </View>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.l, maxWidth: 860 },
  family: { gap: space.xs },
  method: { padding: space.m, gap: space.xxs },
  link: { flexDirection: "row", marginLeft: -space.s },
});
