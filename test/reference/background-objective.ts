/** What the background removal minimises, as it is written at the head of evidence/background.ts, by fine sums. Slow; checks the projector. */
export function backgroundObjective(k: Float64Array, chi: Float64Array, background: Float64Array, rLow: number, kWeight: number): number {
  const dk = k[1]! - k[0]!;
  const end = k.at(-1)!;
  const power = (f: (i: number) => number, from: number, to: number, dR: number) => {
    let sum = 0;
    for (let R = from + dR / 2; R < to; R += dR) {
      let [re, im] = [0, 0];
      for (let i = 0; i < k.length; i++) {
        re += f(i) * Math.cos(2 * k[i]! * R);
        im += f(i) * Math.sin(2 * k[i]! * R);
      }
      sum += ((re * re + im * im) * dk * dk * dR) / Math.PI;
    }
    return sum;
  };
  const window = (q: number) => (q > end - 1 ? Math.sin((Math.PI / 2) * (end - q)) ** 2 : 1);
  const low = power((i) => window(k[i]!) * k[i]! ** kWeight * (chi[i]! - background[i]!), 0, rLow, 0.01);
  // Up to π/(2 dk), where the grid's axis ends
  const all = power((i) => (k[i]! ** 2 + 4) ** (kWeight / 2) * background[i]!, 0, Math.PI / (2 * dk), 0.05);
  return low + 0.001 * all;
}
