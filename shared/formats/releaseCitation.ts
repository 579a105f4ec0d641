/** How a release is cited: BibTeX, CSL-JSON and a Citation File Format 1.2.0 file. */

export interface CitedRelease {
  readonly registry: string;
  readonly number: number;
  /** Day it was cut, "2026-12-01". */
  readonly date: string;
  readonly address: string;
  /** Hexadecimal SHA-256. */
  readonly digest: string;
  readonly licence: string;
  readonly demonstration: boolean;
}

const WHAT = "published constraints on the neutral-fraction history of the intergalactic medium";

function titleOf({ registry, number, demonstration }: CitedRelease): string {
  return `${registry}: ${WHAT}, release ${number}${demonstration ? " (invented demonstration)" : ""}`;
}

/** Key of the BibTeX entry. */
export function releaseKey({ registry, number }: CitedRelease): string {
  return `${registry.replace(/[^A-Za-z0-9]/g, "")}Release${number}`;
}

/** One @misc entry, ended by a line feed; underscores and the like in the address stay inside \url. */
export function releaseBibtex(release: CitedRelease): string {
  const [year, month] = release.date.split("-");
  const months = "jan feb mar apr may jun jul aug sep oct nov dec".split(" ");
  return [
    `@misc{${releaseKey(release)},`,
    `  author = {{${release.registry} registry}},`,
    `  title = {{${titleOf(release)}}},`,
    `  year = {${year}},`,
    `  month = ${months[Number(month) - 1]},`,
    `  howpublished = {\\url{${release.address}}},`,
    `  note = {SHA-256 ${release.digest}}`,
    "}",
    "",
  ].join("\n");
}

/** CSL-JSON of one item, as text ended by a line feed. */
export function releaseCsl(release: CitedRelease): string {
  const item = {
    id: releaseKey(release),
    type: "dataset",
    title: titleOf(release),
    author: [{ literal: `${release.registry} registry` }],
    issued: { "date-parts": [release.date.split("-").map(Number)] },
    version: String(release.number),
    URL: release.address,
    note: `SHA-256 ${release.digest}`,
  };
  return `${JSON.stringify([item], null, 2)}\n`;
}

/** CITATION.cff. JSON's strings are YAML's, so no value is read as anything else. */
export function releaseCff(release: CitedRelease): string {
  const quoted = (text: string): string => JSON.stringify(text);
  return [
    "cff-version: 1.2.0",
    `message: ${quoted("Cite this release, and the original papers of the constraints you use.")}`,
    "type: dataset",
    `title: ${quoted(titleOf(release))}`,
    `version: ${quoted(String(release.number))}`,
    `date-released: ${release.date}`,
    "authors:",
    `  - name: ${quoted(`${release.registry} registry`)}`,
    `url: ${quoted(release.address)}`,
    `license: ${quoted(release.licence.trim().replace(/\s+/g, "-"))}`,
    "identifiers:",
    "  - type: other",
    `    value: ${quoted(`sha256:${release.digest}`)}`,
    `    description: ${quoted("Digest over the canonical form of the release's content")}`,
    "",
  ].join("\n");
}
