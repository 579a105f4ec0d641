import { useQuery } from "@apollo/client/react";
import { useLocalSearchParams, useRouter } from "expo-router";
import { useEffect, useMemo, useState } from "react";
import { StyleSheet, View } from "react-native";

import { filterInput } from "@/apollo/filterInput";
import { Button } from "@/components/Button";
import { Card, Divider } from "@/components/Card";
import { Choice } from "@/components/Choice";
import { Empty } from "@/components/feedback/Empty";
import { Failed } from "@/components/feedback/Failed";
import { Loading } from "@/components/feedback/Loading";
import { FilterPanel } from "@/components/filter/FilterPanel";
import { useAddressFilter } from "@/components/filter/useAddressFilter";
import { Notice } from "@/components/Notice";
import { StepBar } from "@/components/StepBar";
import { Caption, Dense, Section } from "@/components/Text";
import { Screen } from "@/layout/Screen";
import { useLayoutClass } from "@/layout/useLayoutClass";
import { space } from "@/theme/tokens";
import { ReleaseListDocument, TableRecipeDocument } from "~graphql/generated/graphql";
import { isEmptyFilter, paramsToFilter } from "~shared/filter/address";

import { BuilderHead, BuilderRow, type BuiltRow } from "./BuilderRow";
import { Decisions } from "./Decisions";
import { Groups } from "./Groups";
import { RowSheet } from "./RowSheet";
import { SaveTable } from "./SaveTable";
import { EMPTY_DRAFT, recipeOf, useTableDraft } from "./useTableDraft";
import { useProposal } from "./useProposal";

const STEPS = ["filter", "rows", "decisions", "save"] as const;
type StepKey = (typeof STEPS)[number];

/** Filter, rows, decisions, save. The filter stands in the address; the rest keeps itself. */
export function TableBuilderScreen() {
  const address = useAddressFilter();
  const router = useRouter();
  const params = useLocalSearchParams<{
    with?: string;
    step?: string;
    from?: string;
    as?: string;
    release?: string;
  }>();
  const { with: wanted, from } = params;
  const table = useTableDraft();
  const { draft } = table;
  const wide = useLayoutClass() === "wide";
  const [openRow, setOpenRow] = useState<string | null>(null);
  useAskedRelease(params.release ?? null, table.change);
  useAdapted(from ?? null, params.as === "version", table.replace);
  const recipe = recipeOf(draft, filterInput(address.filter));
  const { proposal, refusal, error, refetch } = useProposal(recipe);
  const step: StepKey = STEPS.find((key) => key === params.step) ?? (wide ? "rows" : "filter");
  const go = (key: string) => router.setParams({ step: key });

  const rows = useMemo((): BuiltRow[] => {
    const places = new Map(proposal?.decisions.map(({ id }, index) => [id, index + 1]));
    const constraints = new Map(proposal?.constraints.map((one) => [one.number, one]));
    return (proposal?.rows ?? []).flatMap((row): BuiltRow[] => {
      const constraint = constraints.get(row.number);
      if (!constraint) return [];
      const decisions = (proposal?.decisions ?? [])
        .filter((decision) => decision.rows.includes(row.number))
        .map(({ id, taken }) => ({ number: places.get(id) ?? 0, open: taken === null }));
      return [{ row, constraint, decisions }];
    });
  }, [proposal]);
  const rowsIn = rows.filter(({ row }) => row.included).length;
  const opened = rows.find(({ row }) => row.number === openRow) ?? null;

  const filter = (
    <View style={styles.part}>
      <Source release={draft.release} onChange={(release) => table.change({ release })} />
      <FilterPanel filter={address.filter} onChange={address.setFilter} />
    </View>
  );
  const decisions = proposal ? (
    <Decisions
      decisions={proposal.decisions}
      choices={draft.decisions}
      onDecide={table.decide}
      onTakeProposals={() =>
        table.takeProposals(proposal.decisions.filter(({ taken }) => taken === null))
      }
    />
  ) : null;
  const list = proposal ? (
    <View style={styles.part}>
      <View style={styles.rowsHead}>
        <Section>Rows</Section>
        <Caption muted>{`${rowsIn} in, ${rows.length - rowsIn} out with a reason`}</Caption>
      </View>
      <Card flush>
        {rows.length === 0 ? (
          <Empty
            title="No row matches"
            text="Widen the redshift or clear the families."
            action={
              isEmptyFilter(address.filter) ? undefined : (
                <Button
                  label="Clear the filter"
                  kind="tonal"
                  onPress={() => address.setFilter({})}
                />
              )
            }
          />
        ) : (
          <>
            {wide ? <BuilderHead /> : null}
            <View role="list" aria-label="Candidates">
              {rows.map((built, index) => (
                <View key={built.row.number} role="listitem">
                  {index > 0 || wide ? <Divider /> : null}
                  <BuilderRow
                    built={built}
                    wanted={built.row.number === wanted}
                    onOpen={() => setOpenRow(built.row.number)}
                  />
                </View>
              ))}
            </View>
          </>
        )}
      </Card>
      <Groups mixtures={proposal.mixtures} sets={proposal.sets} />
      <Caption muted>
        Touch a row for its likelihood, another form, or to take it out. Rows are multiplied as
        independent of one another, which is an assumption.
      </Caption>
    </View>
  ) : null;
  const save = (
    <SaveTable
      draft={draft}
      recipe={recipe}
      rowsIn={rowsIn}
      open={proposal?.open ?? 0}
      onChange={table.change}
      onSaved={table.clear}
    />
  );
  const next = STEPS[STEPS.indexOf(step) + 1];
  const body = refusal ? (
    <Notice grade="error">{refusal}</Notice>
  ) : error && !proposal ? (
    <Failed error={error} onRetry={() => void refetch()} />
  ) : !proposal ? (
    <Loading label="Fetching the rows" rows={6} />
  ) : (
    <>
      {wanted && !rows.some(({ row }) => row.number === wanted) ? (
        <Notice
          grade="note"
          action={
            isEmptyFilter(address.filter) ? undefined : (
              <Button label="Clear the filter" kind="tonal" onPress={() => address.setFilter({})} />
            )
          }
        >
          {`${wanted} does not match this filter.`}
        </Notice>
      ) : null}
      {wide || step === "rows" ? list : null}
      {!wide && step === "decisions" ? decisions : null}
      {wide || step === "save" ? save : null}
    </>
  );
  return (
    <Screen
      title={draft.slug ? "New version" : "New table"}
      subtitle={proposal ? `${proposal.filter} · ${sourceWords(draft.release)}` : undefined}
      back={draft.slug ? `/tables/${draft.slug}` : "/tables"}
      list={wide ? <View style={styles.side}>{filter}</View> : undefined}
      aside={
        wide ? (
          <View style={styles.side}>
            {decisions ?? <Dense muted>Decisions follow the rows.</Dense>}
          </View>
        ) : undefined
      }
      footer={
        wide || !next ? undefined : (
          <Button label={NEXT_WORDS[step]} kind="filled" onPress={() => go(next)} />
        )
      }
    >
      <View style={styles.all}>
        {wide ? null : (
          <StepBar
            label="Steps to a table"
            current={step}
            onGo={go}
            steps={[
              { key: "filter", label: "Filter" },
              { key: "rows", label: "Rows" },
              { key: "decisions", label: "Decide" },
              { key: "save", label: "Save" },
            ]}
          />
        )}
        {!wide && step === "filter" ? filter : body}
        {isBegun(draft) ? (
          <View style={styles.buttons}>
            <Button label="Begin again" kind="text" icon="restore" onPress={table.clear} />
          </View>
        ) : null}
      </View>
      {opened ? (
        <RowSheet
          built={opened}
          choice={draft.forms[opened.row.number] ?? null}
          out={draft.out[opened.row.number] ?? null}
          onForm={(choice) => table.setForm(opened.row.number, choice)}
          onOut={(reason) => table.takeOut(opened.row.number, reason)}
          onClose={() => setOpenRow(null)}
        />
      ) : null}
    </Screen>
  );
}

const NEXT_WORDS: Record<StepKey, string> = {
  filter: "See the rows",
  rows: "To the decisions",
  decisions: "To save it",
  save: "",
};

function sourceWords(release: number | null): string {
  return release === null ? "latest approved records" : `release ${release}`;
}

function isBegun(draft: typeof EMPTY_DRAFT): boolean {
  return JSON.stringify(draft) !== JSON.stringify(EMPTY_DRAFT);
}

/** Which records the table draws from: a release that never changes, or those of now. */
function Source({
  release,
  onChange,
}: {
  release: number | null;
  onChange: (release: number | null) => void;
}) {
  const { data } = useQuery(ReleaseListDocument);
  const releases = data?.releases ?? [];
  if (releases.length === 0 && release === null) return null;
  return (
    <Choice
      label="Records from"
      value={release === null ? "latest" : String(release)}
      options={[
        { value: "latest", label: "Latest approved" },
        ...releases.map(({ number }) => ({ value: String(number), label: `Release ${number}` })),
      ]}
      onChange={(value) => onChange(value === null || value === "latest" ? null : Number(value))}
      hint={
        release === null ? "Follows the registry as it stands now." : "A release never changes."
      }
    />
  );
}

/** Takes a release that the address names, once. */
function useAskedRelease(asked: string | null, change: (part: { release: number }) => void): void {
  const router = useRouter();
  useEffect(() => {
    if (asked === null || !/^\d{1,6}$/.test(asked)) return;
    change({ release: Number(asked) });
    router.setParams({ release: undefined });
    // Once: the parameter leaves the address.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [asked]);
}

/** Takes over the recipe of another table, once, and puts its filter in the address. */
function useAdapted(
  from: string | null,
  asVersion: boolean,
  replace: (draft: typeof EMPTY_DRAFT) => void,
): void {
  const router = useRouter();
  const address = useAddressFilter();
  const { data } = useQuery(TableRecipeDocument, {
    variables: { slug: from ?? "" },
    skip: from === null,
  });
  const found = data?.fittingTable;
  useEffect(() => {
    if (from === null || found?.slug !== from || !found.recipe) return;
    const { recipe } = found;
    const own = asVersion && found.ownedByMe;
    replace({
      ...EMPTY_DRAFT,
      name: own ? found.name : "",
      visibility: own ? found.visibility : "public",
      notify: own && found.notify,
      slug: own ? found.slug : null,
      adaptedFrom: own ? null : found.slug,
      release: recipe.release ?? null,
      decisions: Object.fromEntries(
        recipe.decisions.map(({ id, option, byDefault, reason }) => [
          id,
          { option, byDefault, reason: reason ?? "" },
        ]),
      ),
      out: Object.fromEntries(recipe.out.map(({ number, reason }) => [number, reason])),
      forms: Object.fromEntries(
        recipe.forms.flatMap(({ number, form, reason }) =>
          form ? [[number, { form, reason }]] : [],
        ),
      ),
    });
    router.setParams({ from: undefined, as: undefined });
    address.setFilter(
      paramsToFilter(Object.fromEntries(new URLSearchParams(recipe.filter))).filter,
    );
    // Once for the table that was asked for: its parameter leaves the address.
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [from, found]);
}

const styles = StyleSheet.create({
  all: { gap: space.l },
  part: { gap: space.s },
  side: { gap: space.m, padding: space.l },
  rowsHead: { flexDirection: "row", alignItems: "baseline", flexWrap: "wrap", columnGap: space.s },
  buttons: { flexDirection: "row", flexWrap: "wrap", gap: space.s },
});
