import { act, fireEvent, render, screen } from "@testing-library/react";
import { type ChartPoint, HistoryChart, HistoryDrawing } from "@/charts/HistoryChart";
import { LikelihoodCurve } from "@/charts/LikelihoodCurve";
import { PointPreview } from "@/charts/PointPreview";
import { ThemeProvider } from "@/theme/ThemeProvider";
import { tanhHistory } from "~shared/history/tanh";
import { emptyFields } from "~shared/statement/fields";

const point = (
  id: string,
  z: number,
  x: number,
  extra: Partial<ChartPoint["plane"]> = {},
): ChartPoint => ({
  id,
  family: "dampingWing",
  label: `Point ${id}`,
  plane: {
    kind: "twoSided",
    z,
    x,
    xEnds: [x - 0.1, x + 0.1],
    zEnds: null,
    bin: false,
    arrow: null,
    band: null,
    violin: null,
    hollow: false,
    levelStated: true,
    ...extra,
  },
});

const base = {
  width: 900,
  height: 500,
  scheme: "light",
  phone: false,
  points: [point("B", 8, 0.7), point("A", 6, 0.2), point("C", 9, 0.9)],
  histories: [{ id: "a", history: tanhHistory({ zRe: 7.5 }) }],
  domain: [5, 11],
  upperAxis: "age",
  ageOf: (z: number) => 17.3 * (1 + z) ** -1.5,
  logarithmic: false,
} as const;

describe("HistoryChart", () => {
  it("is one stop of the keyboard, walked through by redshift with the arrows", () => {
    render(<HistoryChart {...base} />);
    const stops = screen
      .getAllByRole("button")
      .map((button) => [button.getAttribute("aria-label"), button.tabIndex]);
    expect(stops).toEqual([
      ["Point A", 0],
      ["Point B", -1],
      ["Point C", -1],
    ]);
    const first = screen.getByRole("button", { name: "Point A" });
    act(() => first.focus());
    fireEvent.keyDown(first, { key: "ArrowRight" });
    expect(document.activeElement?.getAttribute("aria-label")).toBe("Point B");
    fireEvent.keyDown(document.activeElement as Element, { key: "End" });
    expect(document.activeElement?.getAttribute("aria-label")).toBe("Point C");
  });

  it("opens a point with its button and leaves it with Escape", () => {
    const select = jest.fn();
    render(<HistoryChart {...base} selectedId="B" onSelect={select} />);
    fireEvent.click(screen.getByRole("button", { name: "Point C" }));
    fireEvent.keyDown(screen.getByRole("button", { name: "Point B" }), { key: "Escape" });
    expect(select.mock.calls).toEqual([["C"], [null]]);
  });

  it("takes the focus back when the panel of a point is gone", () => {
    const { rerender } = render(<HistoryChart {...base} selectedId="B" />);
    rerender(<HistoryChart {...base} selectedId={null} />);
    expect(document.activeElement?.getAttribute("aria-label")).toBe("Point B");
  });

  // jsdom has no layout: the chart's own units are then taken for pixels.
  it("picks the nearest point of a touch, and none far from all", () => {
    const select = jest.fn();
    render(<HistoryChart {...base} onSelect={select} />);
    const chart = screen.getByRole("group");
    // z = 8 stands at 64 + (8 − 5)/6 × 816 = 472; x = 0.7 at 446 − 0.73/1.06 × 390 = 177.4.
    fireEvent.click(chart, { clientX: 480, clientY: 170 });
    fireEvent.click(chart, { clientX: 100, clientY: 100 });
    expect(select.mock.calls).toEqual([["B"], [null]]);
  });

  it("leaves out of keyboard and drawing what lies beyond its axes", () => {
    render(<HistoryChart {...base} points={[point("far", 13, 0.9)]} />);
    expect(screen.queryByRole("button")).toBeNull();
  });
});

describe("HistoryDrawing", () => {
  it("labels the ages inside its redshifts and keeps them apart on a phone", () => {
    const { container, rerender } = render(<HistoryDrawing {...base} />);
    const labels = () =>
      Array.from(container.querySelectorAll("text")).map((text) => text.textContent);
    // Ages of the test's function: 1.18 at z 5, 0.42 at z 11.
    for (const age of ["0.5", "0.6", "1.1"]) expect(labels()).toContain(age);
    rerender(<HistoryDrawing {...base} phone width={390} />);
    expect(labels()).toContain("0.5");
    expect(labels()).toContain("1.1");
  });

  it("names the frequency axis when it is chosen", () => {
    const { container } = render(<HistoryDrawing {...base} upperAxis="frequency" />);
    expect(container.textContent).toContain("Observed 21-cm frequency (MHz)");
  });

  it("dashes the bars of a level that is not stated", () => {
    const { container } = render(
      <HistoryDrawing
        {...base}
        histories={[]}
        points={[point("A", 7, 0.5, { levelStated: false })]}
      />,
    );
    expect(container.querySelectorAll('line[stroke-dasharray="3 2.5"]')).toHaveLength(1);
  });

  it("fogs under the first history only, with 25 stops", () => {
    const two = [base.histories[0], { id: "b", history: tanhHistory({ zRe: 6.5 }) }];
    const { container } = render(<HistoryDrawing {...base} histories={two} />);
    const gradients = Array.from(container.querySelectorAll("linearGradient")).map(
      (gradient) => gradient.querySelectorAll("stop").length,
    );
    expect(gradients.filter((stops) => stops === 25)).toHaveLength(1);
  });

  it("has no fog while the first history is hidden", () => {
    const { container } = render(
      <HistoryDrawing {...base} histories={[null, base.histories[0]]} />,
    );
    const stops = Array.from(container.querySelectorAll("linearGradient")).map(
      (gradient) => gradient.querySelectorAll("stop").length,
    );
    expect(stops).not.toContain(25);
  });
});

describe("LikelihoodCurve", () => {
  it("says in words where the likelihood is highest and where the models stand", () => {
    render(
      <ThemeProvider>
        <LikelihoodCurve
          width={300}
          lines={[{ x: [0, 0.5, 1], density: [0, 2, 0.5], label: "as used" }]}
          marks={[{ x: 0.25, label: "tanh" }]}
        />
      </ThemeProvider>,
    );
    const words = screen.getByRole("img").getAttribute("aria-label");
    expect(words).toContain("as used, highest at 0.500");
    expect(words).toContain("tanh 0.250");
  });
});

describe("PointPreview", () => {
  it("waits for numbers, then says where the point stands", () => {
    const fields = {
      ...emptyFields(),
      quantity: "neutralFraction",
      species: "ionized",
      scale: "linear",
      level: "percent68",
    } as const;
    const { rerender } = render(
      <ThemeProvider>
        <PointPreview fields={fields} />
      </ThemeProvider>,
    );
    expect(screen.queryByRole("img")).toBeNull();
    rerender(
      <ThemeProvider>
        <PointPreview
          fields={{
            ...fields,
            z: "7.2",
            kind: "twoSided",
            value: "0.6",
            plus: "0.1",
            minus: "0.1",
          }}
        />
      </ThemeProvider>,
    );
    expect(screen.getByRole("img").getAttribute("aria-label")).toContain(
      "redshift 7.2 and neutral fraction 0.4",
    );
  });
});
