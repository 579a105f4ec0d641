import { CombinedGraphQLErrors, ServerError } from "@apollo/client/errors";
import { render, screen } from "@testing-library/react";
import { userMessage } from "@/apollo/userMessage";
import { CitationLine } from "@/components/CitationLine";
import { NotationText } from "@/components/NotationText";
import { StatusPill } from "@/components/StatusPill";
import { SymbolText } from "@/components/Text";
import { ThemeProvider } from "@/theme/ThemeProvider";
import { emptyFields } from "~shared/statement/fields";
import { notationAsPrinted } from "~shared/statement/notation";

function show(element: React.ReactNode) {
  return render(<ThemeProvider>{element}</ThemeProvider>);
}

const fraction = {
  ...emptyFields(),
  quantity: "neutralFraction",
  species: "neutral",
  scale: "linear",
  level: "percent68",
} as const;

describe("NotationText", () => {
  it("stacks unequal errors with a true minus and keeps printed zeros", () => {
    const { container } = show(
      <NotationText
        size="stated"
        notation={notationAsPrinted({
          ...fraction,
          kind: "twoSided",
          value: "0.40",
          plus: "0.20",
          minus: "0.1",
        })}
      />,
    );
    for (const text of ["0.40", "+0.20", "−0.1"]) expect(screen.getByText(text)).toBeTruthy();
    expect(container.textContent).not.toContain("-");
  });

  it("sets one width with ± when both are equal", () => {
    const { container } = show(
      <NotationText
        notation={notationAsPrinted({
          ...fraction,
          kind: "twoSided",
          value: "0.55",
          plus: "0.16",
          minus: "0.16",
        })}
      />,
    );
    expect(container.textContent).toContain("0.55 ± 0.16");
  });

  it("never shows a limit without its level", () => {
    const { container } = show(
      <NotationText
        notation={notationAsPrinted({ ...fraction, kind: "upperLimit", value: "0.31" })}
      />,
    );
    expect(container.textContent).toContain("<0.31");
    expect(container.textContent).toContain("68 %");
  });

  it("is heard as one line", () => {
    show(
      <NotationText
        notation={notationAsPrinted({ ...fraction, kind: "upperLimit", value: "0.31" })}
      />,
    );
    expect(screen.getByRole("img").getAttribute("aria-label")).toContain("0.31 at 68 %");
  });
});

describe("SymbolText", () => {
  it("sets the symbol in italics and its subscript upright", () => {
    show(<SymbolText>x_HI</SymbolText>);
    expect(getComputedStyle(screen.getByText("x")).fontStyle).toBe("italic");
    expect(getComputedStyle(screen.getByText("HI")).fontStyle).toBe("normal");
  });
  it("keeps capital Greek upright before an italic letter", () => {
    show(<SymbolText>Δz</SymbolText>);
    expect(getComputedStyle(screen.getByText("Δ")).fontStyle).toBe("normal");
    expect(getComputedStyle(screen.getByText("z")).fontStyle).toBe("italic");
  });
});

describe("StatusPill", () => {
  it("says every state in a word", () => {
    for (const [state, word] of [
      ["draft", "Draft"],
      ["inReview", "In review"],
      ["returned", "Returned"],
      ["approved", "Approved"],
      ["superseded", "Superseded"],
      ["withdrawn", "Withdrawn"],
    ] as const) {
      const { unmount } = show(<StatusPill state={state} />);
      expect(screen.getByText(word)).toBeTruthy();
      unmount();
    }
  });
});

describe("CitationLine", () => {
  it("sets a paper as it will be cited", () => {
    const { container } = show(
      <CitationLine
        citation={{
          authors: ["Osuwande, A.", "Vask, I."],
          shortName: "Osuwande & Vask 2024",
          year: 2024,
          container: "Annals of Invented Cosmology",
          volume: "12",
          pages: "118",
        }}
      />,
    );
    expect(container.textContent).toBe(
      "Osuwande, A. & Vask, I. (2024), Annals of Invented Cosmology 12, 118",
    );
  });
});

describe("userMessage", () => {
  const answer = (extensions: Record<string, unknown>) =>
    new CombinedGraphQLErrors({ data: null, errors: [{ message: "secret", extensions }] as never });

  it("names the way on for what a person can settle", () => {
    expect(userMessage(answer({ code: "UNAUTHENTICATED" }))).toContain("Sign in");
    expect(userMessage(answer({ code: "FORBIDDEN" }))).toContain("role");
  });

  it("gives the request's number for the unexpected, and nothing of the inside", () => {
    const message = userMessage(answer({ code: "INTERNAL", requestId: "r-77" }));
    expect(message).toContain("r-77");
    expect(message).not.toContain("secret");
  });

  it("tells too many attempts from a broken server", () => {
    // jsdom has no Response; the error reads its status alone.
    const response = { status: 429 } as Response;
    const error = new ServerError("x", { response, bodyText: "" });
    expect(userMessage(error)).toContain("Wait");
  });

  it("takes anything else for a lost connection", () => {
    expect(userMessage(new TypeError("Failed to fetch"))).toContain("No connection");
  });
});
