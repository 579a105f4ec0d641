import Svg, { Circle, Path } from "react-native-svg";
import type { MethodFamily } from "~shared/methods/vocabulary";
import { FAMILY_MARKS } from "@/theme/families";
import { useTheme } from "@/theme/ThemeProvider";
import { markerPath } from "./markerPath";

/** A family's marker beside words. Filled: a best value; hollow: a limit or a band. */
export function Marker({
  family,
  hollow = false,
  size = 18,
}: {
  family: MethodFamily;
  hollow?: boolean;
  size?: number;
}) {
  const { scheme, colors } = useTheme();
  const mark = FAMILY_MARKS[family];
  const hue = mark[scheme];
  const open = hollow || mark.shape === "ring";
  return (
    <Svg aria-hidden width={size} height={size} viewBox="-9 -9 18 18">
      <Path
        d={markerPath(mark.shape, open ? 5.8 : 6.3)}
        fill={open ? colors.surface : hue}
        stroke={hue}
        strokeWidth={open ? 1.75 : 0}
        strokeLinejoin="round"
      />
      {mark.shape === "ring" ? <Circle r={hollow ? 1 : 2.4} fill={hue} /> : null}
    </Svg>
  );
}
