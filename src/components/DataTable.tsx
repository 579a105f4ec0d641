import type { ReactNode } from "react";
import { useColors } from "@/theme/ThemeProvider";
import { fonts } from "@/theme/tokens";

export interface Column {
  key: string;
  title: ReactNode;
  align?: "left" | "right" | "center";
  numeric?: boolean;
}

/**
 * A real table; it scrolls sideways in itself where it is wider than the screen. A row that can be
 * pressed holds a button over its first cell, so that it is found by keyboard.
 */
export function DataTable<Row>({
  caption,
  captionVisible = false,
  columns,
  rows,
  rowKey,
  onRowPress,
  highlight,
}: {
  caption: string;
  captionVisible?: boolean;
  columns: readonly Column[];
  rows: readonly (Row & object)[];
  rowKey: (row: Row) => string;
  onRowPress?: (row: Row) => void;
  /** Rows that wait or differ. */
  highlight?: (row: Row) => boolean;
}) {
  const colors = useColors();
  const cell = {
    padding: "8px 12px",
    borderTop: `1px solid ${colors.hairline}`,
    verticalAlign: "middle",
  } as const;
  return (
    <div
      style={{ overflowX: "auto", maxWidth: "100%" }}
      tabIndex={0}
      role="group"
      aria-label={caption}
    >
      <table
        style={{
          borderCollapse: "collapse",
          width: "100%",
          fontFamily: fonts.sans,
          fontSize: 14,
          lineHeight: "20px",
          color: colors.ink,
        }}
      >
        <caption
          className={captionVisible ? undefined : "fogline-hidden"}
          style={{ textAlign: "left", padding: "0 12px 8px", fontWeight: 600 }}
        >
          {caption}
        </caption>
        <thead>
          <tr>
            {columns.map((column) => (
              <th
                key={column.key}
                scope="col"
                style={{
                  padding: "8px 12px",
                  textAlign: column.align ?? (column.numeric ? "right" : "left"),
                  fontWeight: 400,
                  fontSize: 13,
                  color: colors.muted,
                  whiteSpace: "nowrap",
                }}
              >
                {column.title}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr
              key={rowKey(row)}
              onClick={onRowPress ? () => onRowPress(row) : undefined}
              style={{
                height: 44,
                cursor: onRowPress ? "pointer" : undefined,
                backgroundColor: highlight?.(row) ? colors.emberTint : undefined,
              }}
            >
              {columns.map((column, index) => {
                const content = (row as Record<string, ReactNode>)[column.key];
                const style = {
                  ...cell,
                  textAlign: column.align ?? (column.numeric ? "right" : "left"),
                  fontFamily: column.numeric ? fonts.mono : undefined,
                  fontSize: column.numeric ? 15 : undefined,
                } as const;
                return (
                  <td key={column.key} style={style}>
                    {index === 0 && onRowPress ? (
                      <button
                        type="button"
                        onClick={(event) => {
                          event.stopPropagation();
                          onRowPress(row);
                        }}
                        style={{
                          all: "unset",
                          cursor: "pointer",
                          minHeight: 28,
                          display: "inline-flex",
                          alignItems: "center",
                        }}
                        className="fogline-focusable"
                      >
                        {content}
                      </button>
                    ) : (
                      content
                    )}
                  </td>
                );
              })}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}
