/**
 * Ground-state electron configurations of the neutral atoms, Z = 1 … 96: the Madelung order (n + l, then n) and its
 * exceptions. Source of the exceptions: NIST Atomic Spectra Database, ground levels (from memory; compared in the tests
 * with a table made from three other compilations).
 */
export interface Shell {
  readonly n: number;
  readonly l: number;
  /** Electrons, 0 … 2(2l + 1). */
  readonly electrons: number;
}

const HIGHEST_Z = 96;
const LETTERS = 'spdf';

/** What differs from the Madelung filling, outermost shells only. */
const EXCEPTIONS: Readonly<Record<number, string>> = {
  24: '3d5 4s1',
  29: '3d10 4s1',
  41: '4d4 5s1',
  42: '4d5 5s1',
  44: '4d7 5s1',
  45: '4d8 5s1',
  46: '4d10 5s0',
  47: '4d10 5s1',
  57: '4f0 5d1',
  58: '4f1 5d1',
  64: '4f7 5d1',
  78: '5d9 6s1',
  79: '5d10 6s1',
  89: '5f0 6d1',
  90: '5f0 6d2',
  91: '5f2 6d1',
  92: '5f3 6d1',
  93: '5f4 6d1',
  96: '5f7 6d1',
};

/** Shells in Madelung order. */
const ORDER: readonly (readonly [n: number, l: number])[] = Array.from({ length: 8 }, (_, i) => i + 1)
  .flatMap((n) => Array.from({ length: Math.min(n, 4) }, (_, l) => [n, l] as const))
  .sort(([n1, l1], [n2, l2]) => n1 + l1 - (n2 + l2) || n1 - n2);

/**
 * Occupied shells of the neutral atom, by n then l.
 *
 * @throws {RangeError} Z not a whole number from 1 to 96
 */
export function groundConfiguration(Z: number): Shell[] {
  if (!(Number.isInteger(Z) && Z >= 1 && Z <= HIGHEST_Z)) {
    throw new RangeError(`groundConfiguration: Z must be a whole number from 1 to ${HIGHEST_Z}, got ${Z}`);
  }
  const filling = new Map<string, Shell>();
  let left = Z;
  for (const [n, l] of ORDER) {
    const electrons = Math.min(left, 2 * (2 * l + 1));
    filling.set(`${n}${LETTERS[l]}`, { n, l, electrons });
    left -= electrons;
  }
  for (const term of EXCEPTIONS[Z]?.split(' ') ?? []) {
    const name = term.slice(0, 2);
    filling.set(name, { ...filling.get(name)!, electrons: Number(term.slice(2)) });
  }
  return [...filling.values()].filter(({ electrons }) => electrons > 0).sort((a, b) => a.n - b.n || a.l - b.l);
}

/** "2p", "4f". */
export const shellName = (n: number, l: number): string => `${n}${LETTERS[l]}`;
