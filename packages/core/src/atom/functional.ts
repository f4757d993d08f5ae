/**
 * Local-density exchange and correlation of the unpolarised electron gas. Hartree atomic units; ρ in bohr⁻³.
 *
 *   exchange      ε_x = −(3/4π) k_F,  v_x = −k_F/π,   k_F = (3π²ρ)^{1/3}
 *   correlation   von Barth & Hedin, J. Phys. C 5, 1629 (1972): ε_c = −(0.0504/2) F(rs/30), v_c = −(0.0504/2) ln(1 + 30/rs)
 *                 Vosko, Wilk & Nusair, Can. J. Phys. 58, 1200 (1980), form 5
 *   relativistic exchange factor: MacDonald & Vosko, J. Phys. C 12, 2977 (1979)
 */
export type ExchangeCorrelationName = 'barth-hedin' | 'vwn';

export interface LocalFunctional {
  /** Exchange-correlation potential, hartree; 0 at ρ = 0. */
  potential(rho: number): number;
  /** Exchange-correlation energy per electron, hartree; 0 at ρ = 0. */
  energy(rho: number): number;
}

/**
 * A functional by name.
 *
 * @param speedOfLight finite: exchange takes the MacDonald–Vosko factor; Infinity: plain exchange
 */
export function localFunctional(name: ExchangeCorrelationName, speedOfLight = Number.POSITIVE_INFINITY): LocalFunctional {
  const correlation = name === 'vwn' ? VWN : BARTH_HEDIN;
  return {
    potential(rho) {
      if (!(rho > 0)) return 0;
      const kF = fermiMomentum(rho);
      return (-kF / Math.PI) * exchangePotentialFactor(kF / speedOfLight) + correlation.potential(wignerSeitzRadius(rho));
    },
    energy(rho) {
      if (!(rho > 0)) return 0;
      const kF = fermiMomentum(rho);
      return ((-0.75 * kF) / Math.PI) * exchangeEnergyFactor(kF / speedOfLight) + correlation.energy(wignerSeitzRadius(rho));
    },
  };
}

/** von Barth–Hedin exchange-correlation potential of a density, hartree: the ground-state potential of the scattering room. */
export function vxcBarthHedin(rho: number): number {
  if (!(rho > 0)) return 0;
  return -fermiMomentum(rho) / Math.PI + BARTH_HEDIN.potential(wignerSeitzRadius(rho));
}

/** k_F = (3π²ρ)^{1/3}, bohr⁻¹. */
export const fermiMomentum = (rho: number): number => Math.cbrt(3 * Math.PI * Math.PI * rho);

/** rs, bohr. */
export const wignerSeitzRadius = (rho: number): number => Math.cbrt(3 / (4 * Math.PI * rho));

/** φ of MacDonald & Vosko, β = k_F/c; the series serves where the closed form cancels. */
function exchangeEnergyFactor(beta: number): number {
  if (beta < 0.02) return 1 - (2 / 3) * beta * beta;
  const eta = Math.hypot(1, beta);
  const inner = (beta * eta - Math.asinh(beta)) / (beta * beta);
  return 1 - 1.5 * inner * inner;
}

function exchangePotentialFactor(beta: number): number {
  if (beta < 1e-4) return 1;
  return -0.5 + (1.5 * Math.asinh(beta)) / (beta * Math.hypot(1, beta));
}

/** Correlation by rs, bohr; hartree. */
interface Correlation {
  potential(rs: number): number;
  energy(rs: number): number;
}

const BARTH_HEDIN: Correlation = {
  potential: (rs) => -0.0252 * Math.log1p(30 / rs),
  energy: (rs) => {
    const z = rs / 30;
    // (1 + z³) ln(1 + 1/z) + z/2 − z² − 1/3 cancels for large z; its expansion there is 3/(4z) − ….
    if (z > 200) return -0.0252 * (0.75 / z - 0.3 / (z * z));
    return -0.0252 * ((1 + z * z * z) * Math.log1p(1 / z) + z / 2 - z * z - 1 / 3);
  },
};

const VWN = vwnCorrelation(0.0310907, -0.10498, 3.72744, 12.9352);

function vwnCorrelation(A: number, x0: number, b: number, c: number): Correlation {
  const Q = Math.sqrt(4 * c - b * b);
  const X = (x: number): number => x * x + b * x + c;
  const shift = (b * x0) / X(x0);
  const energy = (rs: number): number => {
    const x = Math.sqrt(rs);
    const angle = Math.atan(Q / (2 * x + b));
    return (
      A * (Math.log((x * x) / X(x)) + ((2 * b) / Q) * angle - shift * (Math.log((x - x0) ** 2 / X(x)) + ((2 * (b + 2 * x0)) / Q) * angle))
    );
  };
  return {
    energy,
    potential(rs) {
      const x = Math.sqrt(rs);
      const t = 2 * x + b;
      const slope =
        A * (2 / x - t / X(x) - (4 * b) / (t * t + Q * Q) - shift * (2 / (x - x0) - t / X(x) - (4 * (2 * x0 + b)) / (t * t + Q * Q)));
      return energy(rs) - (x / 6) * slope;
    },
  };
}
