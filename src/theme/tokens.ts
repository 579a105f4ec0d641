/** Colours, sizes and type of the look, once, for screens, charts and downloads. */

export type SchemeName = "light" | "dark";

export interface Colors {
  paper: string;
  surface: string;
  sunken: string;
  ink: string;
  muted: string;
  primary: string;
  onPrimary: string;
  petrolTint: string;
  ember: string;
  emberTint: string;
  emberText: string;
  fog: string;
  hairline: string;
  outline: string;
  scrim: string;
}

export const schemes: Record<SchemeName, Colors> = {
  light: {
    paper: "#F7F5F0",
    surface: "#FFFFFF",
    sunken: "#F0EEE8",
    ink: "#1B2730",
    muted: "#55646E",
    primary: "#0F5460",
    onPrimary: "#FFFFFF",
    petrolTint: "#DFEAEB",
    ember: "#B4481E",
    emberTint: "#FAEBE2",
    emberText: "#97390F",
    fog: "#AFBEC6",
    hairline: "#DEDCD5",
    outline: "#7B8A92",
    scrim: "rgba(16, 24, 29, 0.45)",
  },
  dark: {
    paper: "#10181D",
    surface: "#18232A",
    sunken: "#141E24",
    ink: "#E8EDEE",
    muted: "#A3B1B8",
    primary: "#7CC6CF",
    onPrimary: "#06262C",
    petrolTint: "#1F3C43",
    ember: "#F0A27A",
    emberTint: "#3A2A22",
    emberText: "#F0A27A",
    fog: "#31424B",
    hairline: "#2B3941",
    outline: "#71828B",
    scrim: "rgba(0, 0, 0, 0.6)",
  },
};

export const space = { xxs: 4, xs: 8, s: 12, m: 16, l: 24, xl: 32, xxl: 48, xxxl: 64 } as const;

export const radius = { field: 4, chip: 8, card: 12, sheet: 20, pill: 999 } as const;

/** Smallest side of anything that is touched. */
export const target = 44;

export const widths = { medium: 700, wide: 1100, rail: 96, list: 320, inspector: 368 } as const;

export const fonts = {
  serif: '"Source Serif 4", Georgia, serif',
  sans: '"Source Sans 3", "Helvetica Neue", Arial, sans-serif',
  mono: '"Source Code Pro", Menlo, Consolas, monospace',
} as const;
