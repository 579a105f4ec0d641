import type { ReactNode } from "react";
import type { GestureResponderEvent, StyleProp, ViewStyle } from "react-native";
import { TouchableRipple } from "react-native-paper";
import { useRouter } from "expo-router";
import { web } from "./web";

/**
 * What everything touched is made of: Paper's ripple, which as a link is a real anchor
 * (opens in a new tab with the modifier keys) and else a button.
 */
export function Press({
  href,
  onPress,
  label,
  disabled = false,
  style,
  attributes = {},
  children,
}: {
  href?: string;
  onPress?: () => void;
  /** Accessible name, where the content does not say it. */
  label?: string;
  /** Stays focusable, so that the reason beside it is found. */
  disabled?: boolean;
  style?: StyleProp<ViewStyle>;
  attributes?: Record<string, unknown>;
  children: ReactNode;
}) {
  const router = useRouter();
  const outside = href !== undefined && /^(https?:|mailto:|\/api\/)/.test(href);

  function press(event: GestureResponderEvent) {
    if (disabled) return;
    if (href !== undefined) {
      const mouse = event as unknown as MouseEvent;
      if (outside || mouse.metaKey || mouse.ctrlKey || mouse.shiftKey) {
        onPress?.();
        return; // the browser follows the anchor
      }
      mouse.preventDefault?.();
      onPress?.();
      router.push(href as never);
      return;
    }
    onPress?.();
  }

  // Pressable writes its own aria-disabled over the one it is given, and its `disabled` takes the
  // focus away.
  const markDisabled = (element: unknown) => {
    if (!(element instanceof Element)) return;
    if (disabled) element.setAttribute("aria-disabled", "true");
    else element.removeAttribute("aria-disabled");
  };

  return (
    <TouchableRipple
      ref={markDisabled as never}
      borderless
      onPress={press}
      style={style}
      {...web({
        role: href === undefined ? "button" : "link",
        "aria-label": label,
        href,
        ...(href !== undefined && /^https?:/.test(href)
          ? { hrefAttrs: { target: "_blank", rel: "noreferrer" } }
          : {}),
        ...attributes,
      })}
    >
      <>{children}</>
    </TouchableRipple>
  );
}
