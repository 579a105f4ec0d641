import { configureFonts, MD3DarkTheme, MD3LightTheme, type MD3Theme } from "react-native-paper";
import { fonts, schemes, type SchemeName } from "./tokens";

function paperTheme(scheme: SchemeName): MD3Theme {
  const base = scheme === "light" ? MD3LightTheme : MD3DarkTheme;
  const colors = schemes[scheme];
  return {
    ...base,
    roundness: 4,
    fonts: configureFonts({ config: { fontFamily: fonts.sans } }),
    colors: {
      ...base.colors,
      primary: colors.primary,
      onPrimary: colors.onPrimary,
      primaryContainer: colors.petrolTint,
      onPrimaryContainer: colors.primary,
      secondary: colors.muted,
      secondaryContainer: colors.petrolTint,
      onSecondaryContainer: colors.primary,
      tertiary: colors.ember,
      tertiaryContainer: colors.emberTint,
      onTertiaryContainer: colors.emberText,
      error: colors.ember,
      errorContainer: colors.emberTint,
      onErrorContainer: colors.emberText,
      background: colors.paper,
      onBackground: colors.ink,
      surface: colors.surface,
      surfaceVariant: colors.sunken,
      onSurface: colors.ink,
      onSurfaceVariant: colors.muted,
      outline: colors.outline,
      outlineVariant: colors.hairline,
      backdrop: colors.scrim,
    },
  };
}

export const paperThemes: Record<SchemeName, MD3Theme> = {
  light: paperTheme("light"),
  dark: paperTheme("dark"),
};
