/** Powers of k in numbers and in words. */
const POWERS = ['', 'k', 'k²', 'k³'];
const K_UNITS = ['', ' (Å⁻¹)', ' (Å⁻²)', ' (Å⁻³)'];
const R_UNITS = ['Å⁻¹', 'Å⁻²', 'Å⁻³', 'Å⁻⁴'];

/** kⁿ y */
export const weigh = (k: ArrayLike<number>, y: ArrayLike<number>, n: number): Float64Array =>
  Float64Array.from(k, (value, i) => value ** n * y[i]!);

/** "k³χ(k) (Å⁻³)" */
export const chiLabel = (n: number): string => `${POWERS[n] ?? `k^${n}`}χ(k)${K_UNITS[n] ?? ''}`;

/** "|χ(R)| (Å⁻⁴)" */
export const magnitudeLabel = (n: number): string => `|χ(R)| (${R_UNITS[n] ?? `Å^−${n + 1}`})`;
