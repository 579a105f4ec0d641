import { fireEvent, render, screen } from "@testing-library/react";
import { useState } from "react";
import { Button } from "@/components/Button";
import { CheckRow, RadioRows } from "@/components/CheckRow";
import { Choice } from "@/components/Choice";
import { DataTable } from "@/components/DataTable";
import { Field } from "@/components/Field";
import { Segments } from "@/components/Segments";
import { Sheet } from "@/components/Sheet";
import { Slider } from "@/components/Slider";
import { TagField } from "@/components/TagField";
import { Title } from "@/components/Text";
import { ThemeProvider } from "@/theme/ThemeProvider";

const mockPush = jest.fn();
jest.mock("expo-router", () => ({ useRouter: () => ({ push: (href: string) => mockPush(href) }) }));

function show(element: React.ReactNode) {
  return render(<ThemeProvider>{element}</ThemeProvider>);
}

beforeEach(() => mockPush.mockClear());

describe("Button", () => {
  it("acts when pressed", () => {
    const act = jest.fn();
    show(<Button label="Store my reading" kind="filled" onPress={act} />);
    fireEvent.click(screen.getByRole("button", { name: "Store my reading" }));
    expect(act).toHaveBeenCalledTimes(1);
  });

  it("says why it is disabled, stays reachable and does nothing", () => {
    const act = jest.fn();
    show(<Button label="Approve" onPress={act} disabledBecause="One field differs." />);
    const button = screen.getByRole("button", { name: "Approve" });
    fireEvent.click(button);
    expect(act).not.toHaveBeenCalled();
    expect(button.getAttribute("aria-disabled")).toBe("true");
    const reason = document.getElementById(button.getAttribute("aria-describedby") ?? "");
    expect(reason?.textContent).toBe("One field differs.");
  });

  it("is an anchor when it leads somewhere, and keeps the page", () => {
    show(<Button label="Open the record" href="/constraints/FL-0042" />);
    const link = screen.getByRole("link", { name: "Open the record" });
    expect(link.getAttribute("href")).toBe("/constraints/FL-0042");
    fireEvent.click(link);
    expect(mockPush).toHaveBeenCalledWith("/constraints/FL-0042");
  });
});

describe("Field", () => {
  it("is found by its label and tells its error", () => {
    show(<Field label="Minus" value="0.1l" onChangeText={() => undefined} error="Not a number." />);
    const input = screen.getByLabelText("Minus");
    expect(input.getAttribute("aria-invalid")).toBe("true");
    const about = document.getElementById(input.getAttribute("aria-describedby") ?? "");
    expect(about?.textContent).toBe("Not a number.");
  });

  it("hands over what is typed, character for character", () => {
    const typed = jest.fn();
    show(<Field label="Value" value="" onChangeText={typed} numeric />);
    fireEvent.change(screen.getByLabelText("Value"), { target: { value: "0.30" } });
    expect(typed).toHaveBeenCalledWith("0.30");
  });
});

describe("Choice", () => {
  it("is a select that can be emptied again", () => {
    const chosen = jest.fn();
    show(
      <Choice
        label="Level"
        value="percent68"
        options={[
          { value: "percent68", label: "68 %" },
          { value: "percent95", label: "95 %" },
        ]}
        onChange={chosen}
      />,
    );
    const select = screen.getByRole("combobox", { name: "Level" });
    fireEvent.change(select, { target: { value: "percent95" } });
    fireEvent.change(select, { target: { value: "" } });
    expect(chosen.mock.calls).toEqual([["percent95"], [null]]);
  });
});

describe("Segments, CheckRow and RadioRows", () => {
  it("are radios and checkboxes with their labels", () => {
    const segment = jest.fn();
    const check = jest.fn();
    const row = jest.fn();
    show(
      <>
        <Segments
          label="Species"
          value="neutral"
          options={[
            { value: "neutral", label: "Neutral" },
            { value: "ionized", label: "Ionized" },
          ]}
          onChange={segment}
        />
        <CheckRow label="Keep both" checked={false} onChange={check} />
        <RadioRows
          label="Overlap"
          value={null}
          options={[{ value: "newer", label: "Keep the newer", tag: "proposed" }]}
          onChange={row}
        />
      </>,
    );
    expect(screen.getByRole<HTMLInputElement>("radio", { name: "Neutral" }).checked).toBe(true);
    fireEvent.click(screen.getByRole("radio", { name: "Ionized" }));
    fireEvent.click(screen.getByRole("checkbox", { name: "Keep both" }));
    const proposal = screen.getByRole<HTMLInputElement>("radio", { name: /Keep the newer/ });
    expect(proposal.checked).toBe(false);
    fireEvent.click(proposal);
    expect(segment).toHaveBeenCalledWith("ionized");
    expect(check).toHaveBeenCalledWith(true);
    expect(row).toHaveBeenCalledWith("newer");
  });
});

describe("TagField", () => {
  function Tags() {
    const [values, setValues] = useState<string[]>(["Larkspur Q07"]);
    return <TagField label="Data used" values={values} onChange={setValues} />;
  }
  it("adds at a comma, refuses a double, and takes a word out again", () => {
    show(<Tags />);
    const entry = screen.getByLabelText("Data used");
    fireEvent.change(entry, { target: { value: "Tern Deep," } });
    fireEvent.change(entry, { target: { value: "Tern Deep," } });
    expect(screen.getAllByRole("button", { name: "Remove Tern Deep" })).toHaveLength(1);
    fireEvent.click(screen.getByRole("button", { name: "Remove Larkspur Q07" }));
    expect(screen.queryByRole("button", { name: "Remove Larkspur Q07" })).toBeNull();
  });
});

describe("Slider", () => {
  it("is a slider with a name, a value and its ends", () => {
    const moved = jest.fn();
    show(
      <Slider
        label="Midpoint"
        context="tanh"
        value={7.67}
        min={5}
        max={12}
        step={0.01}
        digits={2}
        onChange={moved}
      />,
    );
    const slider = screen.getByRole<HTMLInputElement>("slider", { name: "Midpoint, tanh" });
    expect([slider.min, slider.value, slider.max]).toEqual(["5", "7.67", "12"]);
    fireEvent.change(slider, { target: { value: "8.1" } });
    expect(moved).toHaveBeenCalledWith(8.1);
  });

  it("takes a typed number, held between its ends, and ignores what is no number", () => {
    const moved = jest.fn();
    show(
      <Slider
        label="Width"
        value={0.5}
        min={0.1}
        max={3}
        step={0.01}
        digits={2}
        onChange={moved}
      />,
    );
    const entry = screen.getByLabelText("Width, value");
    fireEvent.change(entry, { target: { value: "9" } });
    fireEvent.keyDown(entry, { key: "Enter" });
    fireEvent.change(entry, { target: { value: "wide" } });
    fireEvent.keyDown(entry, { key: "Enter" });
    expect(moved.mock.calls).toEqual([[3]]);
  });
});

describe("DataTable", () => {
  it("is a table whose rows open by a button", () => {
    const open = jest.fn();
    show(
      <DataTable
        caption="Rows"
        columns={[
          { key: "name", title: "Source" },
          { key: "z", title: "Redshift", numeric: true },
        ]}
        rows={[{ name: "Hallorin 2020", z: "7.13" }]}
        rowKey={(row) => row.name}
        onRowPress={open}
      />,
    );
    expect(screen.getByRole("table", { name: "Rows" })).toBeTruthy();
    expect(screen.getByRole("columnheader", { name: "Redshift" })).toBeTruthy();
    fireEvent.click(screen.getByRole("button", { name: "Hallorin 2020" }));
    expect(open).toHaveBeenCalledTimes(1);
  });
});

describe("Sheet", () => {
  it("is a named dialog that Escape closes", () => {
    const close = jest.fn();
    show(
      <Sheet visible title="Filter" onClose={close}>
        <Title level={3}>Inside</Title>
      </Sheet>,
    );
    expect(screen.getByRole("dialog", { name: "Filter" })).toBeTruthy();
    fireEvent.keyUp(document, { key: "Escape" });
    expect(close).toHaveBeenCalledTimes(1);
  });
});
