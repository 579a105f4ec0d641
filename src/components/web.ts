/**
 * Attributes that react-native-web hands to the DOM but React Native's types do not know.
 * Spread the result: `<View {...web({ "aria-pressed": true })} />`.
 */
export function web(attributes: Record<string, unknown>): object {
  return attributes;
}
