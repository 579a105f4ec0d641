import { TSpan } from "react-native-svg";

import { fonts } from "@/theme/tokens";

const UPRIGHT = /^[\u0391-\u03A9\d\s−–().,=+]+$/;

/** A symbol inside an SVG text, set as SymbolText sets it: italic, its subscript upright and lower. */
export function SvgSymbol({ symbol, size }: { symbol: string; size: number }) {
  const [base = "", subscript] = symbol.split("_");
  const parts = base.match(/[\u0391-\u03A9\d\s−–().,=+]+|[^\u0391-\u03A9\d\s−–().,=+]+/g) ?? [];
  return (
    <>
      {parts.map((part, index) => (
        <TSpan
          key={index}
          fontFamily={fonts.serif}
          fontStyle={UPRIGHT.test(part) ? "normal" : "italic"}
        >
          {part}
        </TSpan>
      ))}
      {subscript ? (
        <TSpan fontFamily={fonts.serif} fontSize={size * 0.72} dy={size * 0.25}>
          {subscript}
        </TSpan>
      ) : null}
    </>
  );
}
