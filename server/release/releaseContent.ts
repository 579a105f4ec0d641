/** The canonical form of a release, in pieces, so that none is ever held whole. */
import { createHash } from "node:crypto";

import canonicalize from "canonicalize";
import type { EntityManager } from "typeorm";

import { REGISTRY } from "~server/download/header";

import { ReleaseRow, type Release } from "./release.entity";

export const RELEASE_FORMAT = "fogline-release/1";
const PAGE = 200;

/** Rows of a release by record number, page by page. */
export async function* releaseRows(
  manager: EntityManager,
  number: number,
): AsyncGenerator<ReleaseRow> {
  let after = 0;
  for (;;) {
    const page = await manager
      .createQueryBuilder(ReleaseRow, "row")
      .where("row.releaseNumber = :number AND row.constraintId > :after", { number, after })
      .orderBy("row.constraintId")
      .take(PAGE)
      .getMany();
    yield* page;
    const last = page.at(-1);
    if (!last || page.length < PAGE) return;
    after = last.constraintId;
  }
}

export function canonicalText(value: unknown): string {
  const text = canonicalize(value);
  if (text === undefined) throw new TypeError("only a JSON value has a canonical form");
  return text;
}

/**
 * The RFC 8785 form of what a release says: names of members in order, no blank, no clock and no number
 * of the release, so that the same records under the same licence have the same digest.
 *
 * @param contents - Canonical texts of the rows, by record number.
 */
export async function* canonicalContent(
  release: Pick<Release, "demonstration" | "licence" | "surroundings">,
  contents: AsyncIterable<string> | Iterable<string>,
): AsyncGenerator<string> {
  const { demonstration, licence, surroundings } = release;
  yield `{"demonstration":${String(demonstration)},"licence":${JSON.stringify(licence)},"records":[`;
  let first = true;
  for await (const content of contents) {
    yield first ? content : `,${content}`;
    first = false;
  }
  yield `],"registry":${JSON.stringify(REGISTRY)},"surroundings":${surroundings}}`;
}

/** Hexadecimal SHA-256 over pieces of a text. */
export async function digestOfPieces(pieces: AsyncIterable<string>): Promise<string> {
  const hash = createHash("sha256");
  for await (const piece of pieces) hash.update(piece, "utf8");
  return hash.digest("hex");
}

/** Hexadecimal SHA-256 over a text. */
export function digestOfText(text: string): string {
  return createHash("sha256").update(text, "utf8").digest("hex");
}

/**
 * The release as a JSON file in pieces. Its `content` stands there in canonical form, so that the digest is
 * that of the bytes between `"content":` and the closing brace of the file.
 *
 * @param address - Of the release's page.
 */
export async function* releaseJson(
  manager: EntityManager,
  release: Release,
  address: string,
): AsyncGenerator<string> {
  const head = {
    format: RELEASE_FORMAT,
    release: release.number,
    date: release.cutAt.toISOString().slice(0, 10),
    digest: `sha256:${release.digest}`,
    digestOver: "SHA-256 over the RFC 8785 form of content",
    address,
    notes: release.notes,
    lastEvent: {
      sequence: release.lastEventSequence,
      digest: release.lastEventDigest,
      at: release.lastEventAt.toISOString(),
    },
  };
  yield `${JSON.stringify(head).slice(0, -1)},"content":`;
  yield* canonicalContent(release, contentsOf(manager, release.number));
  yield "}\n";
}

async function* contentsOf(manager: EntityManager, number: number): AsyncGenerator<string> {
  for await (const row of releaseRows(manager, number)) yield row.content;
}
