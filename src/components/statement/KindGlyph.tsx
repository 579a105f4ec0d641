import Svg, { Circle, Line, Path, Rect } from "react-native-svg";

import type { StatementKind } from "~shared/statement/fields";

/** How a statement is drawn in the chart, as a sign of 28 by 28. */
export function KindGlyph({
  kind,
  color,
  size = 28,
}: {
  kind: StatementKind;
  color: string;
  size?: number;
}) {
  return (
    <Svg width={size} height={size} viewBox="0 0 28 28" aria-hidden>
      <Strokes kind={kind} color={color} />
    </Svg>
  );
}

function Strokes({ kind, color }: { kind: StatementKind; color: string }) {
  const line = { stroke: color, strokeWidth: 2 };
  switch (kind) {
    case "twoSided":
      return (
        <>
          <Line x1={14} y1={3} x2={14} y2={25} {...line} />
          <Circle cx={14} cy={14} r={5} fill={color} />
        </>
      );
    case "upperLimit":
      return (
        <>
          <Circle cx={14} cy={7} r={4.5} fill="none" {...line} />
          <Line x1={14} y1={11.5} x2={14} y2={20} {...line} />
          <Path d="M9.5 18.5h9L14 26z" fill={color} />
        </>
      );
    case "lowerLimit":
      return (
        <>
          <Circle cx={14} cy={21} r={4.5} fill="none" {...line} />
          <Line x1={14} y1={16.5} x2={14} y2={8} {...line} />
          <Path d="M9.5 9.5h9L14 2z" fill={color} />
        </>
      );
    case "band":
      return (
        <>
          <Rect x={9} y={3} width={10} height={22} fill={color} fillOpacity={0.2} {...line} />
          <Circle cx={14} cy={14} r={3} fill="none" {...line} />
        </>
      );
    case "curve":
      return (
        <>
          <Path d="M12 2c0 6 10 8 10 12S12 20 12 26z" fill={color} fillOpacity={0.2} {...line} />
          <Circle cx={12} cy={14} r={4} fill={color} />
        </>
      );
    case "qualitative":
      return <Path d="M5 8h18M5 14h18M5 20h11" fill="none" {...line} />;
  }
}
