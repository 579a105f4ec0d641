import { useColors } from "@/theme/ThemeProvider";
import { fonts, radius } from "@/theme/tokens";

/** Strongest tint of a cell: ink on it keeps a contrast above 5 in both themes. */
const STRONGEST = 0.45;

/** A colour as #RRGGBB with an opacity from 0 to 1. */
function withOpacity(color: string, opacity: number): string {
  return `${color}${Math.round(opacity * 255)
    .toString(16)
    .padStart(2, "0")}`;
}

/**
 * A symmetric matrix as a table whose cells are tinted by their correlation: petrol above 0, ember
 * below, paper at 0. Every number stands in its cell with its sign; no colour has to be read.
 *
 * @param labels - Of rows and columns, [n]; `words` is what is heard of a row.
 * @param rho - Correlations from −1 to 1, [n, n]: they tint the cells.
 * @param texts - What the cells say, [n, n]: numbers as printed, or correlations.
 * @param marked - Cells to frame, as "row.column" from 0.
 */
export function HeatMap({
  caption,
  labels,
  rho,
  texts,
  marked = new Set(),
}: {
  caption: string;
  labels: readonly { short: string; words: string }[];
  rho: readonly (readonly number[])[];
  texts: readonly (readonly string[])[];
  marked?: ReadonlySet<string>;
}) {
  const colors = useColors();
  const head = {
    padding: "4px 8px",
    fontFamily: fonts.mono,
    fontSize: 13,
    fontWeight: 400,
    color: colors.muted,
    whiteSpace: "nowrap",
  } as const;
  const tint = (value: number): string =>
    withOpacity(
      value < 0 ? colors.ember : colors.primary,
      STRONGEST * Math.min(1, Math.abs(value)),
    );
  return (
    <div
      style={{ overflowX: "auto", maxWidth: "100%" }}
      tabIndex={0}
      role="group"
      aria-label={caption}
    >
      <table
        style={{
          borderCollapse: "separate",
          borderSpacing: 2,
          color: colors.ink,
          fontFamily: fonts.mono,
        }}
      >
        <caption className="fogline-hidden">{caption}</caption>
        <thead>
          <tr>
            <td />
            {labels.map((label, at) => (
              <th key={at} scope="col" style={head} aria-label={label.words}>
                {label.short}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {labels.map((label, row) => (
            <tr key={row}>
              <th
                scope="row"
                style={{ ...head, textAlign: "left", fontFamily: fonts.sans, color: colors.ink }}
              >
                <span style={{ fontFamily: fonts.mono, color: colors.muted }}>{label.short}</span>{" "}
                {label.words}
              </th>
              {labels.map((_column, column) => (
                <td
                  key={column}
                  style={{
                    minWidth: 56,
                    height: 44,
                    padding: "0 8px",
                    textAlign: "right",
                    fontSize: 14,
                    borderRadius: radius.field,
                    backgroundColor: tint(rho[row]?.[column] ?? 0),
                    boxShadow: marked.has(`${row}.${column}`)
                      ? `inset 0 0 0 2px ${colors.ember}`
                      : `inset 0 0 0 1px ${colors.hairline}`,
                  }}
                >
                  {(texts[row]?.[column] ?? "").replace(/^-/, "−")}
                </td>
              ))}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

/** The scale of the tints, from −1 to 1. */
export function HeatScale() {
  const colors = useColors();
  const steps = [-1, -0.5, 0, 0.5, 1];
  return (
    <div
      role="img"
      aria-label="Tints from minus one, ember, over zero, none, to one, petrol"
      style={{ display: "flex", gap: 2, flexWrap: "wrap" }}
    >
      {steps.map((value) => (
        <span
          key={value}
          aria-hidden
          style={{
            minWidth: 44,
            padding: "2px 6px",
            textAlign: "center",
            fontFamily: fonts.mono,
            fontSize: 12,
            color: colors.ink,
            borderRadius: radius.field,
            boxShadow: `inset 0 0 0 1px ${colors.hairline}`,
            backgroundColor: withOpacity(
              value < 0 ? colors.ember : colors.primary,
              STRONGEST * Math.abs(value),
            ),
          }}
        >
          {String(value).replace("-", "−")}
        </span>
      ))}
    </div>
  );
}
