/**
 * Anderson mixing (J. Assoc. Comput. Mach. 12, 547 (1965)) for a fixed point x = F(x): the next iterate is the combination
 * of the last few that makes the residual F(x) − x smallest, moved along that residual.
 */
export class AndersonMixer {
  private readonly n: number;
  private readonly depth: number;
  private readonly linearSteps: number;
  private readonly beta: number;
  private step = 0;
  /** Last iterates and residuals, newest first. */
  private readonly inputs: Float64Array[] = [];
  private readonly residuals: Float64Array[] = [];

  /**
   * @param n            length of x
   * @param depth        number of iterates combined
   * @param linearSteps  plain steps x += beta (F − x) before the first combination
   * @param beta         part of the residual taken
   */
  constructor(n: number, depth: number, linearSteps: number, beta: number) {
    this.n = n;
    this.depth = depth;
    this.linearSteps = linearSteps;
    this.beta = beta;
  }

  /** Replace x by the next iterate; fx = F(x). */
  mix(x: Float64Array, fx: Float64Array): void {
    const { n, depth, beta, inputs, residuals } = this;
    const recycled = inputs.length >= depth;
    const input = recycled ? inputs.pop()! : new Float64Array(n);
    const residual = recycled ? residuals.pop()! : new Float64Array(n);
    input.set(x);
    for (let i = 0; i < n; i++) residual[i] = fx[i]! - x[i]!;
    inputs.unshift(input);
    residuals.unshift(residual);
    const weights = this.step++ < this.linearSteps ? [1] : this.weights();
    for (let i = 0; i < n; i++) {
      let value = 0;
      for (let j = 0; j < weights.length; j++) value += weights[j]! * (inputs[j]![i]! + beta * residuals[j]![i]!);
      x[i] = value;
    }
  }

  /** Weights, summing to 1, that make |Σ w_j residual_j|² smallest; a tiny ridge keeps the small system regular. */
  private weights(): number[] {
    const { residuals, n } = this;
    const m = residuals.length - 1;
    if (m === 0) return [1];
    const newest = residuals[0]!;
    const A: number[][] = [];
    const b: number[] = [];
    for (let i = 0; i < m; i++) {
      A.push(new Array<number>(m).fill(0));
      let right = 0;
      const di = residuals[i + 1]!;
      for (let k = 0; k < n; k++) right += newest[k]! * (newest[k]! - di[k]!);
      b.push(right);
      for (let j = 0; j <= i; j++) {
        const dj = residuals[j + 1]!;
        let sum = 0;
        for (let k = 0; k < n; k++) sum += (newest[k]! - di[k]!) * (newest[k]! - dj[k]!);
        A[i]![j] = sum;
        A[j]![i] = sum;
      }
    }
    for (let i = 0; i < m; i++) A[i]![i]! *= 1 + 1e-10;
    const theta = solveSmall(A, b);
    return [1 - theta.reduce((sum, value) => sum + value, 0), ...theta];
  }
}

/** Gaussian elimination with pivoting of a system of a few unknowns; A and b are used up. */
function solveSmall(A: number[][], b: number[]): number[] {
  const m = b.length;
  for (let column = 0; column < m; column++) {
    let pivot = column;
    for (let row = column + 1; row < m; row++) if (Math.abs(A[row]![column]!) > Math.abs(A[pivot]![column]!)) pivot = row;
    [A[column], A[pivot]] = [A[pivot]!, A[column]!];
    [b[column], b[pivot]] = [b[pivot]!, b[column]!];
    for (let row = column + 1; row < m; row++) {
      const factor = A[row]![column]! / (A[column]![column]! || 1e-300);
      for (let k = column; k < m; k++) A[row]![k]! -= factor * A[column]![k]!;
      b[row]! -= factor * b[column]!;
    }
  }
  const x = new Array<number>(m).fill(0);
  for (let row = m - 1; row >= 0; row--) {
    let sum = b[row]!;
    for (let k = row + 1; k < m; k++) sum -= A[row]![k]! * x[k]!;
    x[row] = sum / (A[row]![row]! || 1e-300);
  }
  return x;
}
