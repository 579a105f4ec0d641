import Svg, { Path } from "react-native-svg";
import { iconPaths, type IconName } from "./iconPaths";

export type { IconName } from "./iconPaths";

/**
 * An icon as an SVG path. Decorative: the name belongs to the control around it.
 * Also stands in for the icon font that Paper would load (metro.config.js).
 */
export default function Icon({
  name,
  color = "currentColor",
  size = 24,
}: {
  name: string;
  color?: string;
  size?: number;
}) {
  const path = iconPaths[name as IconName];
  if (path === undefined) return null;
  return (
    <Svg aria-hidden width={size} height={size} viewBox="0 0 24 24">
      <Path d={path} fill={color} />
    </Svg>
  );
}
