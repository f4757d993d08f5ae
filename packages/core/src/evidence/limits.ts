/** Limits of what is taken for a scan, far beyond what is measured, so that a file cannot ask for more than a machine has. */
import { InputError } from '../errors.js';

/** Å⁻¹: 6.1 keV above the edge; nothing oscillates there. */
const LARGEST_K = 40;
/** Points of one scan: a tenth of an eV over 2 keV. */
export const MOST_POINTS = 20_000;

/** @throws {InputError} data that reach beyond any EXAFS */
export function checkKRange(kMax: number): void {
  if (!(kMax <= LARGEST_K))
    throw new InputError(
      `the data reach k = ${kMax.toPrecision(3)} Å⁻¹, beyond the ${LARGEST_K} that are treated; check the unit, or state a smaller k-max`,
    );
}

/** @throws {InputError} numbers so large or small that arithmetic on them ends in none */
export function checkFinite(...series: readonly Float64Array[]): void {
  if (!series.every((values) => values.every(Number.isFinite)))
    throw new InputError('the data hold numbers too large or too small to be worked with; check the columns');
}
