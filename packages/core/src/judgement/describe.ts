/** What a judgement says beside its numbers: disorder by shell, and what was assumed. */
import { distanceResolution, groupShells } from '../disorder/index.js';
import type { PathClass } from '../predict/unknowns.js';
import type { Minimum } from './minimise.js';
import type { Trial, TrialSpectrum } from './trial.js';
import type { TrialModel } from './trial-model.js';
import type { DisorderRow, JudgeOptions } from './types.js';

/** Predicted disorder of each shell, and what the data want of it, Å². Shells are like scatterers within the resolution of the data. */
export function disorderRows({ spectra }: Trial, model: TrialModel, { z }: Minimum): DisorderRow[] {
  return spectra.flatMap((spectrum) => {
    const { element, temperature, vector } = spectrum;
    const at = (name: string, kind: PathClass): number => {
      const p = model.indexOf(`${name} ${element} ${kind}`)!;
      return model.list[p]!.value(z[p]!);
    };
    const members = spectrum.sites.flatMap(({ signal, sigma2, classes }) =>
      signal.paths.flatMap(({ legs, vertices, degeneracy, halfLength }, j) => {
        if (legs !== 2) return [];
        const kind = classes[vertices[1]!]!;
        const thermal = sigma2[j]!;
        return [
          {
            element: signal.site.atoms[vertices[1]!]!.element,
            halfLength,
            degeneracy: degeneracy * signal.site.weight,
            thermal,
            wanted: thermal * at('thermal-scale', kind) + at('extra-static', kind),
          },
        ];
      }),
    );
    return groupShells(members, distanceResolution(...vector.window.kRange)).map((shell) => {
      const wanted = shell.members.reduce((sum, m) => sum + members[m]!.degeneracy * members[m]!.wanted, 0) / shell.count;
      const label = `${element}–${shell.element} ${shell.meanDistance.toFixed(2)} Å${spectra.length > 1 ? `, ${temperature} K` : ''}`;
      const { thermal, static: spread } = shell.sigma2;
      return { label, count: shell.count, meanDistance: shell.meanDistance, thermal, static: spread, wanted: wanted + spread };
    });
  });
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
