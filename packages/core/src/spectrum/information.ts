/** How much a stretch of spectrum can tell. */

export interface Information {
  /** 2 Δk ΔR/π (Lee, Citrin, Eisenberger & Kincaid, Rev. Mod. Phys. 53, 769 (1981)). */
  readonly independentPoints: number;
  /** The same plus 2 (Stern, Phys. Rev. B 48, 9825 (1993)). */
  readonly independentPointsStern: number;
  /** Å: distances closer than π/(2 Δk) cannot be told apart. */
  readonly resolution: number;
}

/**
 * Independent points and resolution in distance of a window in k and R.
 *
 * @param kRange  Å⁻¹
 * @param rRange  Å
 * @throws {RangeError} a range is empty
 */
export function informationContent(kRange: readonly [number, number], rRange: readonly [number, number]): Information {
  const dk = kRange[1] - kRange[0];
  const dR = rRange[1] - rRange[0];
  if (!(dk > 0 && dR > 0))
    throw new RangeError(`informationContent: ranges must not be empty, got k ${kRange.join(' to ')}, R ${rRange.join(' to ')}`);
  const independentPoints = (2 * dk * dR) / Math.PI;
  return { independentPoints, independentPointsStern: independentPoints + 2, resolution: Math.PI / (2 * dk) };
}
