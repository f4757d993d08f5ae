/**
 * Smallest value of a smooth function of a few parameters by compass search: along each axis by its step, steps halved when
 * none helps, until all are a thousandth of what they were. Slow, plain, and without a derivative to get wrong.
 */
export function minimise(
  f: (x: readonly number[]) => number,
  start: readonly number[],
  steps: readonly number[],
): { x: number[]; value: number } {
  let x = [...start];
  let value = f(x);
  for (let scale = 1; scale > 1e-3; ) {
    let better = false;
    for (let i = 0; i < x.length; i++) {
      for (const sign of [1, -1]) {
        const next = x.map((xi, j) => (j === i ? xi + sign * scale * steps[i]! : xi));
        const found = f(next);
        if (found < value) {
          [x, value, better] = [next, found, true];
          break;
        }
      }
    }
    if (!better) scale /= 2;
  }
  return { x, value };
}
