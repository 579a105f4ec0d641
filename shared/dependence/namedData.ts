/** What a named sightline, field or sample may hold. */

export const DATA_KINDS = ["sightline", "field", "sample", "unknown"] as const;
/** "unknown" until somebody says what a name stands for. */
export type DataKind = (typeof DATA_KINDS)[number];

export const DATA_KIND_WORDS: Record<DataKind, string> = {
  sightline: "Sightline",
  field: "Field",
  sample: "Sample",
  unknown: "Kind not said yet",
};

export const DATA_RELATIONS = ["subsetOf", "overlaps"] as const;
export type DataRelation = (typeof DATA_RELATIONS)[number];

export const DATA_LENGTHS = {
  name: 200,
  extent: 300,
  note: 2000,
  aliases: 50,
  relations: 100,
} as const;

const DECIMAL = /^[+-]?\d{1,3}(\.\d{1,12})?$/;

/**
 * Why a coordinate can't stand, as a sentence, or null.
 *
 * @param ra - Right ascension, degrees, from 0 to less than 360.
 * @param dec - Declination, degrees, from -90 to 90.
 */
export function coordinateProblem(
  ra: string | null,
  dec: string | null,
): { field: "ra" | "dec"; message: string } | null {
  if (ra === null && dec === null) return null;
  if (ra === null || dec === null) {
    const field = ra === null ? "ra" : "dec";
    return { field, message: "Give both coordinates, or neither." };
  }
  const [alpha, delta] = [ra, dec].map((text) => text.replace("\u2212", "-"));
  if (!DECIMAL.test(alpha ?? "") || !(Number(alpha) >= 0) || Number(alpha) >= 360) {
    return {
      field: "ra",
      message: "The right ascension is a number of degrees from 0 to less than 360.",
    };
  }
  if (!DECIMAL.test(delta ?? "") || Math.abs(Number(delta)) > 90) {
    return { field: "dec", message: "The declination is a number of degrees from −90 to 90." };
  }
  return null;
}

/**
 * Coordinates in hours, minutes and seconds, and in degrees, arc minutes and arc seconds, rounded to
 * hundredths of a second and tenths of an arc second: "07h12m04.80s +05°30′00.0″".
 *
 * @param ra - Degrees, from 0 to less than 360.
 * @param dec - Degrees, from -90 to 90.
 */
export function sexagesimal(ra: number, dec: number): string {
  // Rounded whole before it is split, so that no part ever reads 60.
  const seconds = Math.round((ra / 15) * 360_000) % (24 * 360_000);
  const arcSeconds = Math.round(Math.abs(dec) * 36_000);
  const sign = dec < 0 && arcSeconds > 0 ? "\u2212" : "+";
  const hours = parts(seconds, 360_000, 6000, 100, 2);
  const degrees = parts(arcSeconds, 36_000, 600, 10, 1);
  return `${hours[0]}h${hours[1]}m${hours[2]}s ${sign}${degrees[0]}°${degrees[1]}′${degrees[2]}″`;
}

function parts(
  all: number,
  perLarge: number,
  perMiddle: number,
  perSmall: number,
  digits: number,
): [string, string, string] {
  const two = (value: number): string => String(Math.floor(value)).padStart(2, "0");
  return [
    two(all / perLarge),
    two((all % perLarge) / perMiddle),
    ((all % perMiddle) / perSmall).toFixed(digits).padStart(3 + digits, "0"),
  ];
}

/** A part of an address from a name: letters, digits and hyphens, signs of a declination in words. */
export function dataSlug(name: string): string {
  const slug = name
    .normalize("NFKD")
    .replace(/\p{M}+/gu, "")
    .toLowerCase()
    // The sign of a declination tells two sightlines apart.
    .replace(/(?<=\d)\s*\+\s*(?=\d)/g, " plus ")
    .replace(/(?<=\d)\s*[\u2010-\u2015\u2212-]\s*(?=\d)/g, " minus ")
    .replace(/[^a-z0-9]+/g, "-")
    .replace(/^-+|-+$/g, "")
    .slice(0, 70)
    .replace(/-+$/, "");
  return slug === "" ? "data" : slug;
}
