/**
 * The energy-dependent exchange-correlation potential of the local density, V_xc(ρ, k). Hartree atomic units.
 *
 *   p² = k² + k_F(ρ)²
 *   mean              v_xc + ½ [Re Σ_HL(p) − Re Σ_HL(k_F)] + ½ [Σ_x(p) − Σ_x(k_F)] + i [½ Im Σ_HL(p) − 2 eV]
 *   hedin-lundqvist   v_xc + Re Σ_HL(p) − Re Σ_HL(k_F) + i Im Σ_HL(p)
 *   dirac-hara        v_xc + Σ_x(p) − Σ_x(k_F) + i Im Σ_HL(p)
 *
 * each less iΓ/2, Γ the full width of the core level. v_xc of von Barth & Hedin (1972). That the mean of the two real parts
 * does better than either, and half the loss with a constant better than the whole, is empirical: it was found on measured
 * spectra of crystals with known structure. The spread of the three is the error of the theory.
 */
import { fermiMomentum, vxcBarthHedin, wignerSeitzRadius } from '../atom/index.js';
import { hartreeFromEv } from '../constants.js';
import { diracHara, imaginarySelfEnergy, plasmonThreshold } from './electron-gas.js';
import { tabulatedSelfEnergy } from './self-energy-table.js';
import type { ExchangeCorrelation, SelfEnergyName } from './types.js';

/** Parts of the two real differences, part of the plasmon loss, constant loss in hartree. */
const RECIPES: Readonly<Record<SelfEnergyName, { hedinLundqvist: number; diracHara: number; loss: number; constantLoss: number }>> = {
  mean: { hedinLundqvist: 0.5, diracHara: 0.5, loss: 0.5, constantLoss: hartreeFromEv(2) },
  'hedin-lundqvist': { hedinLundqvist: 1, diracHara: 0, loss: 1, constantLoss: 0 },
  'dirac-hara': { hedinLundqvist: 0, diracHara: 1, loss: 1, constantLoss: 0 },
};

/** Densities below this, bohr⁻³, have no exchange-correlation potential worth the name. */
const RHO_MIN = 1e-12;

/** @param coreWidth full width Γ of the core level, hartree */
export function exchangeCorrelation(name: SelfEnergyName, coreWidth: number): ExchangeCorrelation {
  const recipe = RECIPES[name];
  const pair = new Float64Array(2);
  /** Per density: what does not depend on k. */
  const known = new WeakMap<Float64Array, { kF: Float64Array; threshold: Float64Array; vxc: Float64Array }>();

  function groundState(rho: Float64Array) {
    let found = known.get(rho);
    if (!found) {
      const thin = (value: number): boolean => !(value > RHO_MIN);
      found = {
        kF: rho.map((value) => (thin(value) ? 0 : fermiMomentum(value))),
        threshold: rho.map((value) => (thin(value) ? 0 : plasmonThreshold(wignerSeitzRadius(value)))),
        vxc: rho.map((value) => (thin(value) ? 0 : vxcBarthHedin(value))),
      };
      known.set(rho, found);
    }
    return found;
  }

  return {
    name,
    evaluate(rho, k, re, im) {
      const { kF, threshold, vxc } = groundState(rho);
      for (let i = 0; i < rho.length; i++) {
        const fermi = kF[i]!;
        re[i] = vxc[i]!;
        im[i] = -recipe.constantLoss - 0.5 * coreWidth;
        if (fermi === 0) continue;
        const p = Math.sqrt(k * k + fermi * fermi);
        const rs = wignerSeitzRadius(rho[i]!);
        if (recipe.hedinLundqvist > 0) {
          tabulatedSelfEnergy(rs, p / fermi, threshold[i]!, pair);
          re[i]! += recipe.hedinLundqvist * (pair[0]! - pair[1]!);
        }
        if (recipe.diracHara > 0) re[i]! += recipe.diracHara * fermi * (diracHara(p / fermi) + 1 / Math.PI);
        im[i]! += recipe.loss * imaginarySelfEnergy(rs, p);
      }
    },
  };
}
