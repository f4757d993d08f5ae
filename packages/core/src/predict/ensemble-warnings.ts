/** What should be known before an average over frames is trusted. */
import type { Diagnostic } from '../errors.js';
import { apartIn } from './ensemble-routes.js';
import { type BlockPlan, SiteKernel } from './ensemble-sums.js';

/** From so many frames the error of a variance, √(2/n), is below 20 %. */
const FEW_FRAMES = 50;
/** A neighbour whose distance moves by more than this, rms in Å, has no one place. */
const LOOSE = 0.5;

/** @param samples  packed frames, evenly spaced */
export function ensembleWarnings(block: BlockPlan, samples: readonly Float64Array[], frames: number): Diagnostic[] {
  const found: Diagnostic[] = [
    {
      code: 'ensemble-motion',
      message:
        'The disorder is that of the frames: classical dynamics lacks the zero-point motion, which stiff bonds at low temperature mostly have; no temperature was put in.',
    },
  ];
  if (frames < FEW_FRAMES)
    found.push({
      code: 'few-frames',
      message: `${frames} frames give each σ² with a sampling error of ${(100 * Math.sqrt(2 / frames)).toFixed(0)} %, more where frames follow closely on one another.`,
    });
  const loose = block.sites.reduce((sum, site) => {
    const kernel = new SiteKernel(block, site);
    const single = site.groups.filter(({ legs }) => legs === 2);
    const sums = single.map(() => [0, 0]);
    for (const frame of samples) {
      const xyz = kernel.places(frame);
      for (const [g, { routes }] of single.entries()) {
        const r = apartIn(xyz, routes[0]!, routes[1]!);
        sums[g]![0]! += r / samples.length;
        sums[g]![1]! += (r * r) / samples.length;
      }
    }
    return sum + sums.filter(([mean, square]) => square! - mean! * mean! > LOOSE * LOOSE).length;
  }, 0);
  if (loose > 0)
    found.push({
      code: 'atoms-wander',
      message: `${loose} neighbours change their distance by more than ${LOOSE} Å rms: paths are those of the mean surroundings, and atoms that change places are followed where they go; --renew takes paths and phase shifts anew along the trajectory.`,
    });
  return found;
}
