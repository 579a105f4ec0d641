import { useEffect, useRef, useState } from "react";
import { useQuery } from "@apollo/client/react";
import { StyleSheet, View } from "react-native";
import { HistoryLine } from "@/charts/HistoryLine";
import { LikelihoodCurve } from "@/charts/LikelihoodCurve";
import { Button, IconButton } from "@/components/Button";
import { Divider } from "@/components/Card";
import { CiteSheet } from "@/components/CiteSheet";
import { Marker } from "@/components/Marker";
import { NotationText } from "@/components/NotationText";
import { Notice, Strong } from "@/components/Notice";
import { RecordTitle } from "@/components/RecordTitle";
import { Block, Caption, Dense, Mono, SymbolText } from "@/components/Text";
import { FAMILY_MARKS } from "@/theme/families";
import { useTheme } from "@/theme/ThemeProvider";
import { space } from "@/theme/tokens";
import { HistoryPointDocument } from "~graphql/generated/graphql";
import { FORM_WORDS, type RowLikelihood, rowLikelihood } from "~shared/likelihood";
import { methodsOf } from "~shared/methods/vocabulary";
import { type Notation, notationAsPrinted, notationAsUsed } from "~shared/statement/notation";
import type { AsUsed } from "~shared/statement/asUsed";
import {
  ESTIMATOR_WORDS,
  levelPhrase,
  VERSION_WORDS,
  WEIGHTING_WORDS,
} from "~shared/statement/words";
import type { HistoryRow } from "@/charts/rows";
import { shownNumber } from "./readouts";
import type { Overlay } from "./useOverlays";

/** A touched point: as printed, as used, its likelihood beside the models, its caution, the ways on. */
export function PointPanel({
  row,
  overlays,
  onClose,
}: {
  row: HistoryRow;
  overlays: readonly Overlay[];
  onClose: () => void;
}) {
  const head = useRef<View>(null);
  const [citing, setCiting] = useState(false);
  const { data } = useQuery(HistoryPointDocument, {
    variables: { number: row.number },
    fetchPolicy: "cache-first",
  });
  const detail = data?.constraint ?? null;
  const { fields, used } = row;
  const place = [row.citation.shortName, fields.place].filter(Boolean).join(", ");
  const version = fields.versionRead ? VERSION_WORDS[fields.versionRead].toLowerCase() : null;
  const likelihood = used === null ? null : rowLikelihood(used);
  const form = likelihood && !("leftOut" in likelihood) ? FORM_WORDS[likelihood.form] : null;
  const hollow =
    used !== null &&
    (used.kind === "band" || used.kind === "upperLimit" || used.kind === "lowerLimit");

  useEffect(() => {
    (head.current as unknown as HTMLElement | null)?.focus({ preventScroll: true });
  }, [row.number]);

  return (
    <View
      role="region"
      aria-label={`Point ${row.quotable}`}
      style={styles.all}
      {...({
        onKeyDown: (event: KeyboardEvent) => {
          if (event.key === "Escape") onClose();
        },
      } as object)}
    >
      <View style={styles.head}>
        <View style={styles.marker}>
          <Marker family={row.family} hollow={hollow} size={22} />
        </View>
        <View style={styles.titles} ref={head} {...({ tabIndex: -1 } as object)}>
          <Block level={2}>
            <RecordTitle fields={fields} />
          </Block>
          <Dense muted>
            {place}
            {version ? ` · ${version}` : ""}
          </Dense>
        </View>
        <IconButton icon="close" label="Close the point" onPress={onClose} />
      </View>
      <Divider />
      <View style={styles.pair}>
        <View style={styles.half}>
          <Caption>As printed</Caption>
          <NotationText notation={notationAsPrinted(fields)} size="panel" tail={false} />
          <Dense>
            {[
              levelPhrase(fields.level, fields.levelPercent),
              fields.estimator ? ESTIMATOR_WORDS[fields.estimator].toLowerCase() : null,
              fields.weighting ? WEIGHTING_WORDS[fields.weighting].toLowerCase() : null,
            ]
              .filter(Boolean)
              .join(", ")}
          </Dense>
        </View>
        <View style={styles.half}>
          <Caption>As used</Caption>
          {used === null ? (
            <Dense muted>Not complete enough to be used.</Dense>
          ) : (
            <>
              <NotationText notation={inOneSigma(used)} size="panel" tail={false} />
              {used.sigmaDerived && used.kind !== "curve" ? (
                <Dense>
                  one-sigma equivalent{form ? `, ${form}` : ""},{" "}
                  <Dense style={styles.derived}>derived</Dense>
                </Dense>
              ) : (
                <Dense>
                  {[notationAsUsed(used).tail, form].filter(Boolean).join(", ")}
                  {used.derived ? (
                    <>
                      , <Dense style={styles.derived}>derived</Dense>
                    </>
                  ) : null}
                </Dense>
              )}
            </>
          )}
        </View>
      </View>
      <Divider />
      <PointLikelihood row={row} overlays={overlays} />
      <PointCaution row={row} shared={detail?.sharesDataWith ?? []} />
      <View style={styles.actions}>
        <Button label="Open the record" kind="filled" href={`/constraints/${row.number}`} />
        {detail ? (
          <Button
            label="Cite"
            kind="outline"
            icon="format-quote-close"
            onPress={() => setCiting(true)}
          />
        ) : null}
      </View>
      {detail ? (
        <CiteSheet
          visible={citing}
          onClose={() => setCiting(false)}
          quotable={row.quotable}
          citation={detail.citation}
        />
      ) : null}
    </View>
  );
}

/** As used, its widths as one-sigma equivalents; both to the decimals that give the smaller one two digits. */
function inOneSigma(used: AsUsed): Notation {
  const notation = notationAsUsed(used);
  const { sigmaMinus, sigmaPlus } = used;
  // A curve is used as it stands, whatever is quoted beside it.
  if (!used.sigmaDerived || used.kind === "curve" || !sigmaMinus || !sigmaPlus) return notation;
  const digits = Math.max(0, 1 - Math.floor(Math.log10(Math.min(sigmaMinus, sigmaPlus))));
  return { ...notation, plus: sigmaPlus.toFixed(digits), minus: sigmaMinus.toFixed(digits) };
}

/** A title with its z set as a symbol. */
function PointLikelihood({ row, overlays }: { row: HistoryRow; overlays: readonly Overlay[] }) {
  const { scheme } = useTheme();
  const likelihood = row.used === null ? null : rowLikelihood(row.used);
  if (likelihood === null || "leftOut" in likelihood) {
    return (
      <Dense muted>
        No likelihood by default: {likelihood?.leftOut ?? "the record is incomplete."}
      </Dense>
    );
  }
  const values = overlays.flatMap((overlay) => {
    const score = overlay.score.at(row.number);
    return score?.model === null || score?.model === undefined
      ? []
      : [{ overlay, model: score.model, minus2LnL: score.minus2LnL }];
  });
  return (
    <View style={styles.likelihood}>
      <View style={styles.here}>
        <Caption>
          Likelihood of <SymbolText muted>{axisSymbol(likelihood)}</SymbolText>
        </Caption>
        <View style={styles.values}>
          {values.map(({ overlay, model, minus2LnL }) => (
            <View key={overlay.id} style={styles.value}>
              <HistoryLine look={overlay.look} width={24} />
              <Dense>
                {overlay.name} here <Mono>{model.toPrecision(3)}</Mono>
                {minus2LnL === null ? null : (
                  <>
                    , −2 ln <SymbolText>L</SymbolText> <Mono>{shownNumber(minus2LnL, 2)}</Mono>
                  </>
                )}
              </Dense>
            </View>
          ))}
        </View>
      </View>
      <LikelihoodCurve
        lines={[{ ...likelihood.curve(161), label: row.quotable }]}
        hue={FAMILY_MARKS[row.family][scheme]}
        height={124}
        symbol={null}
        words={`Likelihood of ${row.quotable}`}
        marks={values.map(({ overlay, model }) => ({
          label: overlay.name,
          x: likelihood.evaluatedIn === "log10" ? Math.log10(model) : model,
        }))}
      />
    </View>
  );
}

function axisSymbol({ quantity, evaluatedIn }: RowLikelihood): string {
  switch (quantity) {
    case "opticalDepth":
    case "opticalDepthRange":
      return "τ";
    case "redshiftAtFraction":
      return "z";
    case "duration":
      return "Δz";
    default:
      return evaluatedIn === "log10" ? "log x_HI" : "x_HI";
  }
}

function PointCaution({
  row,
  shared,
}: {
  row: HistoryRow;
  shared: readonly { number: string; shortName: string; via: string }[];
}) {
  const caution = methodsOf(row.fields.methodTags)
    .map((method) => method.caution)
    .join(" ");
  const via = [...new Set(shared.map((link) => link.via))];
  return (
    <Notice grade="caution">
      <Dense>
        Model-dependent. {caution}{" "}
        {shared.length > 0 ? (
          <>
            Shares <Strong>{via.join(", ")}</Strong> with{" "}
            {shared.length === 1 ? "one other record" : `${shared.length} other records`}: use one.
          </>
        ) : row.fields.dataKnown === false ? (
          "The data used are unknown; unknown is not none."
        ) : null}
      </Dense>
    </Notice>
  );
}

const styles = StyleSheet.create({
  all: { gap: space.s },
  head: { flexDirection: "row", alignItems: "flex-start", gap: space.s },
  marker: { paddingTop: 3 },
  titles: { flex: 1, minWidth: 0 },
  pair: { flexDirection: "row", flexWrap: "wrap", gap: space.m },
  half: { flex: 1, minWidth: 148 },
  derived: { fontStyle: "italic" },
  likelihood: { gap: space.xxs },
  here: { flexDirection: "row", justifyContent: "space-between", flexWrap: "wrap", gap: space.xs },
  values: { gap: 2 },
  value: { flexDirection: "row", alignItems: "center", gap: space.xs },
  actions: { flexDirection: "row", flexWrap: "wrap", gap: space.s },
});
