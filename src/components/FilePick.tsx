import { useId, useState } from "react";
import { View } from "react-native";
import { useColors } from "@/theme/ThemeProvider";
import { fonts, radius } from "@/theme/tokens";
import Icon from "./Icon";
import { Caption, Label } from "./Text";

interface Props {
  label: string;
  accept: string;
  /** A text file, read here. */
  onPick?: (file: { name: string; text: string }) => void;
  /** Files as they are, several at once; nothing is read. */
  onFiles?: (files: File[]) => void;
}

/** A file from the device. Dropping it on the frame works too. */
export function FilePick({ label, accept, onPick, onFiles }: Props) {
  const colors = useColors();
  const id = useId();
  const [name, setName] = useState<string | null>(null);
  const [problem, setProblem] = useState<string | null>(null);

  async function take(files: FileList | null) {
    const file = files?.[0];
    if (file === undefined) return;
    if (onFiles) return onFiles(Array.from(files ?? []));
    try {
      const text = new TextDecoder("utf-8", { fatal: true }).decode(await file.arrayBuffer());
      setName(file.name);
      setProblem(null);
      onPick?.({ name: file.name, text });
    } catch {
      setProblem(`${file.name} is not a UTF-8 text file.`);
    }
  }

  return (
    <View>
      <label
        htmlFor={id}
        className="fogline-file"
        onDragOver={(event) => event.preventDefault()}
        onDrop={(event) => {
          event.preventDefault();
          void take(event.dataTransfer.files);
        }}
        style={{
          position: "relative",
          display: "flex",
          alignItems: "center",
          gap: 12,
          minHeight: 56,
          padding: "8px 16px",
          boxSizing: "border-box",
          border: `1px dashed ${colors.outline}`,
          borderRadius: radius.chip,
          backgroundColor: colors.surface,
          fontFamily: fonts.sans,
          cursor: "pointer",
        }}
      >
        <Icon name="upload-outline" color={colors.primary} />
        <View style={{ flex: 1, minWidth: 0 }}>
          <Label style={{ color: colors.primary }}>{label}</Label>
          <Caption>{name ?? `${accept.replaceAll(",", ", ")}, or drop it here`}</Caption>
        </View>
        <input
          id={id}
          type="file"
          accept={accept}
          multiple={onFiles !== undefined}
          onChange={(event) => {
            void take(event.target.files);
            // So that the same file can be chosen again after it was refused or removed.
            if (onFiles) event.target.value = "";
          }}
          style={{ position: "absolute", inset: 0, opacity: 0, cursor: "pointer" }}
        />
      </label>
      {problem ? (
        <Caption style={{ color: colors.emberText, paddingTop: 4 }}>{problem}</Caption>
      ) : null}
    </View>
  );
}
