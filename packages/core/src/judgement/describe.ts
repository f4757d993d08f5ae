/** What a judgement says beside its numbers: disorder by shell, and what was assumed. */
import { classOf, type PathClass } from '../predict/unknowns.js';
import type { Minimum } from './minimise.js';
import { describeClass } from './overlength.js';
import type { Trial, TrialSpectrum } from './trial.js';
import type { TrialModel } from './trial-model.js';
import type { DisorderRow, JudgeOptions } from './types.js';

const ROW_CLASSES: readonly PathClass[] = ['nearest', 'metal', 'beyond'];

/** Predicted disorder of each shell class, and what the data want of it, Å². */
export function disorderRows(trial: Trial, model: TrialModel, { z }: Minimum): DisorderRow[] {
  return trial.spectra.flatMap((spectrum) =>
    ROW_CLASSES.flatMap((kind) => {
      const { label, distance, count } = describeClass(spectrum, kind);
      if (count === 0) return [];
      let thermal = 0;
      let spreadOfDistances = 0;
      for (const { signal, sigma2, nearest } of spectrum.sites) {
        signal.paths.forEach(({ legs, vertices, degeneracy, halfLength }, j) => {
          const atom = vertices[1]!;
          if (legs !== 2 || classOf(2, nearest.has(atom), signal.site.atoms[atom]!.element) !== kind) return;
          const weight = (signal.site.weight * degeneracy) / count;
          thermal += weight * sigma2[j]!;
          spreadOfDistances += weight * (halfLength - distance) ** 2;
        });
      }
      const best = (name: string): number => {
        const p = model.indexOf(`${name} ${spectrum.element} ${kind}`)!;
        return model.list[p]!.value(z[p]!);
      };
      const wanted = thermal * best('thermal-scale') + spreadOfDistances + best('extra-static');
      const name = trial.spectra.length > 1 ? `${label} at ${spectrum.temperature} K` : label;
      return [{ label: name, count, meanDistance: distance, thermal, static: spreadOfDistances, wanted }];
    }),
  );
}

/** Spectra of different absorbers: two temperatures of one are the same sites. */
export const distinctAbsorbers = ({ spectra }: Trial): TrialSpectrum[] =>
  spectra.filter(({ element }, i) => spectra.findIndex((other) => other.element === element) === i);

/** Every assumption a referee would ask for, one sentence each. */
export function assumptionsOf(trial: Trial, { coordinateSd }: JudgeOptions, spread: number, modelError: number): string[] {
  const { precision, spectra } = trial;
  return [
    coordinateSd === undefined
      ? `Coordinate uncertainty: ${precision.sigma.toFixed(3)} Å an axis on average; ${precision.origin}.`
      : `Coordinate uncertainty: ${coordinateSd} Å for every distance, as given.`,
    ...spectra.map(({ sites, temperature, element, edge, energyOrigin }) => {
      const inputs = Object.entries(sites[0]?.thermal?.inputs ?? {})
        .map(([name, value]) => `${name} ${value}`)
        .join(', ');
      return `${element} ${edge} at ${temperature} K: thermal disorder by the model "${trial.thermal}"${inputs && ` (${inputs})`}; energy origin expected at ${energyOrigin.mean} ± ${energyOrigin.sd} eV from the data's.`;
    }),
    `Choice of the thermal model: ${trial.thermalReason}`,
    `Additional static disorder: half-normal, ${(0.0015 * spread).toFixed(4)} Å² per shell class.`,
    `Model error: ${(100 * modelError).toFixed(0)} % of the rms of the transform in the window, beside the noise.`,
    'Scattering from first principles with overlapped muffin-tin spheres; hydrogens left out.',
  ];
}
