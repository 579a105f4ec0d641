import { createContext, type ReactNode, useContext, useEffect, useMemo, useState } from "react";
import { useColorScheme } from "react-native";
import { PaperProvider } from "react-native-paper";
import Icon from "@/components/Icon";
import { paperThemes } from "./paperThemes";
import { type Colors, type SchemeName, schemes } from "./tokens";

export type ThemeChoice = "system" | SchemeName;

interface Theme {
  scheme: SchemeName;
  colors: Colors;
  choice: ThemeChoice;
  choose(choice: ThemeChoice): void;
}

const STORED_AS = "fogline.theme";

const ThemeContext = createContext<Theme>({
  scheme: "light",
  colors: schemes.light,
  choice: "system",
  choose: () => undefined,
});

/** The theme in force and the person's choice, which follows the system unless changed. */
export function useTheme(): Theme {
  return useContext(ThemeContext);
}

/** Colours of the theme in force. */
export function useColors(): Colors {
  return useContext(ThemeContext).colors;
}

function storedChoice(): ThemeChoice {
  try {
    const stored = globalThis.localStorage?.getItem(STORED_AS);
    return stored === "light" || stored === "dark" ? stored : "system";
  } catch {
    return "system"; // storage can be forbidden; the system's scheme still works
  }
}

export function ThemeProvider({ children }: { children: ReactNode }) {
  const system = useColorScheme();
  const [choice, setChoice] = useState<ThemeChoice>(storedChoice);
  const scheme: SchemeName = choice === "system" ? (system === "dark" ? "dark" : "light") : choice;

  useEffect(() => {
    if (typeof document === "undefined") return;
    document.documentElement.style.colorScheme = scheme;
    document.documentElement.dataset.scheme = scheme;
    document
      .querySelector('meta[name="theme-color"]')
      ?.setAttribute("content", schemes[scheme].paper);
  }, [scheme]);

  const theme = useMemo<Theme>(
    () => ({
      scheme,
      colors: schemes[scheme],
      choice,
      choose(next) {
        setChoice(next);
        try {
          if (next === "system") globalThis.localStorage?.removeItem(STORED_AS);
          else globalThis.localStorage?.setItem(STORED_AS, next);
        } catch {
          // The choice then lasts until the page is closed.
        }
      },
    }),
    [scheme, choice],
  );
  return (
    <ThemeContext.Provider value={theme}>
      <PaperProvider theme={paperThemes[scheme]} settings={{ icon: PaperIcon }}>
        {children}
      </PaperProvider>
    </ThemeContext.Provider>
  );
}

function PaperIcon({ name, color, size }: { name: string; color?: string; size: number }) {
  return <Icon name={name} color={color} size={size} />;
}
