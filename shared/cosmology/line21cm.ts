import { LINE_21CM_MHZ } from "~shared/constants/physical";
import { DomainError } from "~shared/errors/DomainError";
import { requirePositive, requireWithin } from "~shared/numerics/require";

/**
 * Redshift at which the 21-cm line is observed at a frequency.
 *
 * @param frequencyMHz - Observed frequency, MHz, above 0 and at most 1420.405751768.
 * @returns Redshift, zero or positive.
 * @throws {DomainError} If the frequency lies outside that range.
 */
export function redshiftOf21cm(frequencyMHz: number): number {
  requirePositive("frequencyMHz", frequencyMHz);
  if (frequencyMHz > LINE_21CM_MHZ) {
    throw new DomainError("frequencyMHz", frequencyMHz, `at most ${LINE_21CM_MHZ}`);
  }
  return LINE_21CM_MHZ / frequencyMHz - 1;
}

/**
 * Observed frequency of the 21-cm line from a redshift.
 *
 * @param z - Redshift, zero or positive.
 * @returns MHz, at most 1420.405751768.
 * @throws {DomainError} If z is negative.
 */
export function frequencyOf21cmMHz(z: number): number {
  requireWithin("z", z, 0, Infinity);
  return LINE_21CM_MHZ / (1 + z);
}
