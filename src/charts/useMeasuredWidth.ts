import { useState } from "react";
import type { LayoutChangeEvent } from "react-native";

/** Width that a view got, for drawings that fill it; null before the first layout. */
export function useMeasuredWidth(fixed?: number): {
  width: number | null;
  onLayout: (event: LayoutChangeEvent) => void;
} {
  const [measured, setMeasured] = useState<number | null>(null);
  return {
    width: fixed ?? measured,
    onLayout: (event) => {
      const next = Math.floor(event.nativeEvent.layout.width);
      if (next > 0 && next !== measured) setMeasured(next);
    },
  };
}
