import { orcidsIn } from "~shared/identifiers/orcid";
import { authorMatch } from "~shared/review/recusal";

// 0000-0002-1825-0097 is the example of ORCID's own documentation; the second one differs in its
// digits and carries the check character that ISO 7064 gives for them.
const EXAMPLE = "0000-0002-1825-0097";
const OTHER = "0000-0001-5109-3700";

const person = (parts: object = {}) => ({
  nameOnPapers: "Lena Arvensis",
  furtherNames: [] as string[],
  orcid: null as string | null,
  ...parts,
});

describe("authorMatch", () => {
  it("says by what a person is an author: ORCID before name, name before another name", () => {
    const paper = { authors: ["Arvensis, L.", "Quelle, R."], orcids: [EXAMPLE] };
    expect(authorMatch(person({ orcid: EXAMPLE }), paper)).toBe("orcid");
    expect(authorMatch(person({ orcid: OTHER }), paper)).toBe("name");
    expect(
      authorMatch(person({ nameOnPapers: "Ida Neu", furtherNames: ["Rona Quelle"] }), paper),
    ).toBe("furtherName");
  });

  it("is null for who is by nothing an author", () => {
    const paper = { authors: ["Quelle, R."], orcids: [OTHER] };
    expect(authorMatch(person({ orcid: EXAMPLE, furtherNames: ["L. Feldner"] }), paper)).toBeNull();
  });

  it("matches nobody without an ORCID by a paper's ORCIDs", () => {
    expect(authorMatch(person(), { authors: [], orcids: [EXAMPLE] })).toBeNull();
  });
});

describe("orcidsIn", () => {
  it("finds them as addresses, in CSL-JSON and bare, each once", () => {
    const csl = `{"author":[{"family":"Quelle","ORCID":"http://orcid.org/${EXAMPLE}"}]}`;
    expect(orcidsIn(`${csl} orcid = {${EXAMPLE}; ${OTHER}}`)).toEqual([EXAMPLE, OTHER]);
  });

  it("takes no number whose check character is wrong, nor a part of a longer one", () => {
    expect(orcidsIn("0000-0002-1825-0098 900000-0002-1825-00975")).toEqual([]);
  });
});
