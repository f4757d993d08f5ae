import { expect } from 'vitest';

export interface Tolerance {
  /** Absolute part; default 0. */
  readonly abs?: number;
  /** Relative to |wanted|; default 0. */
  readonly rel?: number;
  readonly label?: string;
}

/** The one numerical comparison of the tests: |got − wanted| ≤ abs + rel·|wanted|; NaN never passes; the error is printed. */
export function expectNear(got: number, wanted: number, { abs = 0, rel = 0, label = 'value' }: Tolerance): void {
  const error = Math.abs(got - wanted);
  const allowed = abs + rel * Math.abs(wanted);
  if (!(error <= allowed)) {
    expect.fail(`${label}: got ${got}, wanted ${wanted}, error ${error.toExponential(3)} > ${allowed.toExponential(3)}`);
  }
  expect(error).toBeLessThanOrEqual(allowed);
}
