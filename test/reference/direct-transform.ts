/** The Fourier sum as it is written, at any R: dk/√π Σ weight chi exp(2ikR). Slow; checks the fast transform. */
export function directTransform(k: Float64Array, weight: Float64Array, chi: Float64Array, R: number): { real: number; imaginary: number } {
  const scale = (k[1]! - k[0]!) / Math.sqrt(Math.PI);
  let real = 0;
  let imaginary = 0;
  for (let i = 0; i < k.length; i++) {
    real += scale * weight[i]! * chi[i]! * Math.cos(2 * k[i]! * R);
    imaginary += scale * weight[i]! * chi[i]! * Math.sin(2 * k[i]! * R);
  }
  return { real, imaginary };
}
