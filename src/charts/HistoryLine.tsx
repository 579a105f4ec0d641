import Svg, { Line } from "react-native-svg";
import { useColors } from "@/theme/ThemeProvider";
import { type HistoryLook, historyLine } from "./looks";

/** A short piece of a history's line, for legends. */
export function HistoryLine({ look, width = 36 }: { look: HistoryLook; width?: number }) {
  const colors = useColors();
  return (
    <Svg aria-hidden width={width} height={6} viewBox={`0 0 ${width} 6`}>
      <Line x1={1} y1={3} x2={width - 1} y2={3} {...historyLine(look, colors)} />
    </Svg>
  );
}
