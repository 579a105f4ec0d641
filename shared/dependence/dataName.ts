/**
 * A sightline's, field's or sample's name in the form in which two spellings are compared:
 * compatibility characters folded, every dash a hyphen-minus, no case, blanks, dots or underscores.
 * Signs stay, since a declination's sign tells two sightlines apart.
 *
 * @param name - As typed, "QSO–H 0712 +05".
 * @returns Comparable form, "qso-h0712+05"; empty when nothing remains.
 */
export function comparableDataName(name: string): string {
  return name
    .normalize("NFKC")
    .replace(/[\u2010-\u2015\u2212]/g, "-")
    .replace(/[\s._]+/g, "")
    .toLowerCase();
}
