import { type ReactNode, useEffect, useRef } from "react";
import { View } from "react-native";

import { Notice } from "@/components/Notice";
import { Screen } from "@/layout/Screen";

/** The frame of the pages around signing in: one column, a real form, so that Enter sends it. */
export function AccountPage({
  title,
  subtitle,
  children,
}: {
  title: string;
  subtitle?: string;
  children: ReactNode;
}) {
  return (
    <Screen title={title} subtitle={subtitle} back="/">
      <View style={{ width: "100%", maxWidth: 440, gap: 24 }}>{children}</View>
    </Screen>
  );
}

/** Entries that are sent together. Focus moves to the first entry that was refused. */
export function Form({
  label,
  onSubmit,
  problem,
  problemField,
  children,
}: {
  label: string;
  onSubmit: () => void;
  /** The refusal that belongs to no single entry. */
  problem?: string | null;
  /** Name of the entry the refusal belongs to. */
  problemField?: string | null;
  children: ReactNode;
}) {
  const form = useRef<HTMLFormElement>(null);
  useEffect(() => {
    if (problemField) form.current?.querySelector<HTMLElement>("[aria-invalid=true]")?.focus();
  }, [problemField]);
  return (
    <form
      ref={form}
      aria-label={label}
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        onSubmit();
      }}
      style={{ display: "flex", flexDirection: "column", gap: 16, margin: 0 }}
    >
      {children}
      {problem ? <Notice grade="error">{problem}</Notice> : null}
    </form>
  );
}
