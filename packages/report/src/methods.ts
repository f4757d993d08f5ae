/** The methods paragraph, in wording that may be published, of what was done in this run and no more. References as [@key]. */
import type { Judgement, Prediction, Reduction } from '@ringtrue/core';

const SELF_ENERGIES: Readonly<Record<Prediction['options']['selfEnergy'], string>> = {
  mean: 'the mean of the Hedin–Lundqvist and Dirac–Hara forms with half of the plasmon loss and a constant loss of 2 eV [@hedin1969, @hara1967]',
  'hedin-lundqvist': 'the Hedin–Lundqvist plasmon-pole form [@hedin1969]',
  'dirac-hara': 'the Dirac–Hara exchange [@hara1967]',
};

const DISORDER: Readonly<Record<string, string>> = {
  debye: 'from the correlated Debye model [@sevillano1979, @poiarkova1999]',
  einstein: 'from Einstein oscillators by bond, beyond them from the correlated Debye model [@sevillano1979]',
  springs: 'from normal modes of a network of springs set up from the coordinates alone [@rappe1992]',
  none: 'left out',
};

export function predictionMethods({ options, program, absorbers, ensemble }: Prediction): string {
  const models = [...new Set(absorbers.map(({ thermal }) => thermal.model))];
  const disorder = ensemble
    ? `Disorder is that of ${ensemble.frames} frames, whose path signals were averaged each at its own geometry.`
    : `Thermal disorder at ${options.temperature} K was taken ${models.map((model) => DISORDER[model] ?? model).join('; ')}, with phase corrections for the effective distribution [@bunker1983, @tranquada1983].`;
  return [
    `EXAFS of the ${absorbers[0]?.element ?? ''} ${options.edge} edge was computed from the coordinates with Ringtrue ${program.version}, without fitting.`,
    `Self-consistent relativistic atoms in the local-density approximation [@barth1972] were overlapped to a muffin-tin potential [@mattheiss1964]; the photoelectron's self-energy was ${SELF_ENERGIES[options.selfEnergy]}, and core-hole widths are tabulated ones [@campbell2001].`,
    `Paths to ${options.radius} Å with up to ${options.maxLegs} legs were summed, single scattering in exact curved waves, multiple scattering by separable propagator matrices [@rehr1990].`,
    disorder,
  ].join(' ');
}

export function reductionMethods({ energyEv, background, noise, scans }: Reduction): string {
  const estimate = `Noise was estimated from the transform at high R${scans.length > 1 ? ' and from the repeated scans' : ''} [@newville1999]; the oscillations drown in it at ${noise.kMaxUseful.toFixed(1)} Å⁻¹.`;
  if (energyEv.length === 0) return `Extracted χ(k) was used as given. ${estimate}`;
  return `${scans.length > 1 ? `${scans.length} scans were aligned by the edge and merged. ` : ''}The background was a spline chosen so that the transform below ${background.rLow.toFixed(2)} Å vanishes [@newville1993]; the same removal was applied to the prediction. ${estimate}`;
}

export function judgementMethods({ evidence, candidates }: Judgement): string {
  const windows = evidence
    .map(
      ({ kRange, rRange, kWeight, independentPoints }) =>
        `k ${kRange[0]}–${kRange[1].toFixed(1)} Å⁻¹ weighted with k^${kWeight}, R ${rRange[0]}–${rRange[1]} Å, ${independentPoints.toFixed(1)} independent points`,
    )
    .join('; ');
  const eta = evidence[0]!.modelError;
  return [
    `Predictions and data were compared as complex Fourier transforms (${windows}; [@stern1993]).`,
    `Energy origin, S0², scale of the thermal disorder, additional static disorder and distances moved only under stated priors; distances by the coordinate precision of the structure [@cruickshank1999, @blow2002]. An error of the theory of ${(100 * eta).toFixed(0)} % of the rms transform was added to the noise.`,
    'The minimum of the sum of misfit and prior terms, X, was tested against chi-squared with the number of independent points; a second test asked whether freeing the distances gains more than chance.',
    candidates.some(({ valence }) => valence.length > 0) ? 'Bond-valence sums use published parameters [@brown1985].' : '',
    candidates.length > 1 || candidates.some(({ rivals }) => rivals.length > 0)
      ? 'Candidates and rivals were ranked by the Laplace approximation to the evidence.'
      : '',
  ]
    .filter((sentence) => sentence !== '')
    .join(' ');
}
