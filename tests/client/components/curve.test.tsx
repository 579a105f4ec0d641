import { TextDecoder } from "node:util";

import "@testing-library/jest-dom";
import { fireEvent, render, screen, waitFor } from "@testing-library/react";
import { useState } from "react";

import { CurveEntry } from "@/components/statement/CurveEntry";
import { CurveReading } from "@/components/statement/CurveReading";
import { informationLostWords } from "@/components/statement/InformationLost";
import { ThemeProvider } from "@/theme/ThemeProvider";
import type { ReadingContent } from "~shared/review/reading";
import { CURVE_LONGEST } from "~shared/statement/curve";
import { type ConstraintFields, emptyFields } from "~shared/statement/fields";

const density = (x: number, sigma = 0.1) =>
  Math.exp(-0.5 * ((x - 0.4) / sigma) ** 2) / (sigma * Math.sqrt(2 * Math.PI));
const TABLE = Array.from(
  { length: 51 },
  (_, i) => `${(i / 50).toFixed(2)},${density(i / 50).toPrecision(5)}`,
).join("\n");

const curve: ConstraintFields = {
  ...emptyFields(),
  quantity: "neutralFraction",
  species: "neutral",
  scale: "linear",
  weighting: "volume",
  z: "7.1",
  zRole: "point",
  kind: "curve",
  curveColumn: "density",
};

function Entry({
  start = curve,
  seen,
}: {
  start?: ConstraintFields;
  seen?: (f: ConstraintFields) => void;
}) {
  const [fields, setFields] = useState(start);
  seen?.(fields);
  return (
    <ThemeProvider>
      <CurveEntry
        fields={fields}
        set={(name, value) => setFields((before) => ({ ...before, [name]: value }))}
      />
    </ThemeProvider>
  );
}

beforeAll(() => {
  // jsdom has none.
  global.TextDecoder = TextDecoder as never;
});

describe("the entry of a curve", () => {
  it("says what was read of pasted rows", () => {
    render(<Entry />);
    fireEvent.change(screen.getByLabelText("Rows of the curve"), {
      target: { value: `x,p\n${TABLE}` },
    });
    expect(screen.getByRole("status")).toHaveTextContent(
      "51 rows from 0.00 to 1.00, highest at 0.40. Columns: x, p.",
    );
  });

  it("names the lines that can't be read", () => {
    render(<Entry start={{ ...curve, curveTable: TABLE.replace("0.10,", "O.10,") }} />);
    expect(screen.getByRole("status")).toHaveTextContent('Line 6: "O.10" is not a number.');
    expect(screen.getByRole("status")).not.toHaveTextContent("rows from");
  });

  it("takes a file, and refuses one that is too long without touching what is there", async () => {
    let fields = curve;
    const { container } = render(<Entry seen={(next) => (fields = next)} />);
    const pick = (name: string, text: string) =>
      fireEvent.change(container.querySelector("input[type=file]")!, {
        target: {
          files: [{ name, arrayBuffer: () => Promise.resolve(Buffer.from(text)) }],
        },
      });
    pick("curve.csv", TABLE);
    await waitFor(() => expect(fields.curveTable).toBe(TABLE));
    pick("chain.csv", "0.1,1\n".repeat(CURVE_LONGEST / 5));
    await waitFor(() =>
      expect(
        screen.getByText(/^chain.csv has 120000 characters; a curve has 100000/),
      ).toBeVisible(),
    );
    expect(fields.curveTable).toBe(TABLE);
    fireEvent.click(screen.getByRole("button", { name: "Take the curve out" }));
    expect(fields.curveTable).toBeNull();
  });
});

describe("the reading of a curve", () => {
  it("asks for its facts and never for its rows", () => {
    let reading: ReadingContent = { ...curve };
    const set = (name: string, value: unknown) => {
      reading = { ...reading, [name]: value };
    };
    render(
      <ThemeProvider>
        <CurveReading reading={reading} set={set as never} error={() => undefined} />
      </ThemeProvider>,
    );
    expect(screen.queryByLabelText("Rows of the curve, pasted")).toBeNull();
    for (const [label, name] of [
      ["Rows of the curve", "curveRows"],
      ["First value of the curve", "curveFirst"],
      ["Last value of the curve", "curveLast"],
      ["Value at its highest point", "curvePeak"],
    ] as const) {
      fireEvent.change(screen.getByLabelText(label), { target: { value: "12" } });
      expect(reading[name]).toBe("12");
    }
  });
});

describe("what a quoted interval loses of a curve", () => {
  const quoted = {
    ...curve,
    curveTable: TABLE,
    value: "0.40",
    plus: "0.20",
    minus: "0.20",
    level: "oneSigma",
    estimator: "mode",
  } as const;

  it("is said in nats", () => {
    // ln 2 − 3/8 = 0.318 for twice the width on the whole line; [0, 1] holds 98 % of the wider one.
    expect(informationLostWords(quoted)).toMatch(/would lose 0\.(29|30|31) nats of the curve/);
    expect(informationLostWords({ ...quoted, plus: "0.10", minus: "0.10" })).toContain(
      "less than 0.01 nats",
    );
  });

  it("is not said without a curve or without numbers beside it", () => {
    expect(informationLostWords({ ...quoted, kind: "twoSided" })).toBeNull();
    expect(informationLostWords({ ...quoted, value: null })).toBeNull();
  });
});
