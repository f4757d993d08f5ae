/**
 * χ(k) of a hidden ensemble: for every frame the routes at that frame's own geometry, their amplitudes and their plain sum; the
 * mean over frames. No Gaussian factor and no σ² anywhere. Phase shifts come from the undisplaced structure. Å, Å⁻¹.
 */
import { pathSignals, type SiteSignalOptions, siteScattering } from '../../packages/core/src/predict/site-signal.js';
import { PathSum, uniformKGrid } from '../../packages/core/src/spectrum/index.js';
import { findSites } from '../../packages/core/src/structure/index.js';
import type { Site, Structure, Vec3 } from '../../packages/core/src/structure/types.js';

const NO_DISORDER = { sigma2: 0, c3: 0 };

export interface EnsembleChi {
  readonly k: Float64Array;
  /** Mean over all frames. */
  readonly chi: Float64Array;
  /** Mean over the first SHORT frames, for a check that costs seconds. */
  readonly short: Float64Array;
}

export const SHORT = 6;

/**
 * @param draw  displaced place of every atom of a site's cluster, a new frame at every call of `next`
 */
export function ensembleChi(
  structure: Structure,
  absorber: string,
  frames: number,
  options: SiteSignalOptions,
  frame: () => (site: Site) => readonly Vec3[],
): EnsembleChi {
  const sites = findSites(structure, { absorber, radius: options.radius + 7 });
  const clock = { now: () => 0, atoms: 0, potentials: 0, phases: 0, paths: 0 };
  const prepared = sites.map((site) => ({ site, scattering: siteScattering(site, options, clock) }));
  const k = uniformKGrid(options.kMax);
  const chi = new Float64Array(k.length);
  let short = chi;
  const one = new Float64Array(k.length);
  for (let f = 0; f < frames; f++) {
    const placesOf = frame();
    for (const { site, scattering } of prepared) {
      const places = placesOf(site);
      const centre = places[0]!;
      const atoms = site.atoms.map((atom, i) => {
        const position = places[i]!;
        return { ...atom, position, distance: Math.hypot(position[0] - centre[0], position[1] - centre[1], position[2] - centre[2]) };
      });
      const { signals, wave, table } = pathSignals({ ...site, atoms }, scattering, options, clock);
      const sum = new PathSum(signals, wave, k, 0, table.k[0]!);
      sum.sum(
        signals.map(() => NO_DISORDER),
        1,
        one,
      );
      for (let i = 0; i < k.length; i++) chi[i]! += site.weight * one[i]!;
    }
    if (f + 1 === Math.min(SHORT, frames)) short = chi.map((value) => value / (f + 1));
  }
  return { k, chi: chi.map((value) => value / frames), short };
}
