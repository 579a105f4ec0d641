import { Circle, G, Path } from "react-native-svg";
import { markerPath } from "@/components/markerPath";
import type { MarkerShape } from "@/theme/families";

/** A marker in a chart: halo of the surface, then the shape, filled or hollow. */
export function MarkShape({
  shape,
  hue,
  surface,
  radius,
  hollow,
  x,
  y,
}: {
  shape: MarkerShape;
  hue: string;
  surface: string;
  radius: number;
  hollow: boolean;
  x: number;
  y: number;
}) {
  const ring = shape === "ring";
  const open = hollow || ring;
  // A hollow marker's line stands half outside; the smaller path keeps both kinds equally large.
  const path = markerPath(shape, open ? radius - 0.6 : radius);
  return (
    <G transform={`translate(${x} ${y})`}>
      <Path
        d={path}
        fill={surface}
        stroke={surface}
        strokeWidth={open ? 5.75 : 4}
        strokeLinejoin="round"
      />
      <Path
        d={path}
        fill={open ? surface : hue}
        stroke={hue}
        strokeWidth={open ? 1.75 : 0}
        strokeLinejoin="miter"
      />
      {ring ? <Circle r={hollow ? 1 : radius * 0.38} fill={hue} /> : null}
    </G>
  );
}
