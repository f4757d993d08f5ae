import type { Judgement } from '@ringtrue/core';
import type { Table } from './prediction-tables.js';

/** The tables of a judgement: candidates, parameters, distances, disorder, valence, rivals. */
export function judgementTables({ candidates, groups }: Judgement): Table[] {
  const groupOf = (file: string): number => groups.findIndex(({ files }) => files.includes(file)) + 1;
  return [
    {
      name: 'candidates',
      title: 'Candidates',
      columns: ['candidate', 'finding', 'X', 'independent points', 'p', 'p of distances', 'R-factor', 'ln Z', 'group'],
      rows: candidates.map((c) => [
        c.file,
        c.finding,
        c.x,
        c.independentPoints,
        c.p,
        c.pDistances,
        c.rFactor,
        c.logEvidence,
        groupOf(c.file),
      ]),
    },
    {
      name: 'unknowns',
      title: 'What moved: every unknown, what was expected of it, where the data put it',
      columns: ['candidate', 'unknown', 'of', 'unit', 'expected', 'expected sd', 'found', 'found sd', 'strain (sd)'],
      rows: candidates.flatMap(({ file, parameters }) =>
        parameters.map(({ name, shell, unit, prior, value, sd, strain }) => [
          file,
          name,
          shell,
          unit,
          prior.mean,
          prior.sd,
          value,
          sd,
          strain,
        ]),
      ),
    },
    {
      name: 'distances',
      title: 'Distances: of the structure, and what is to be added to meet the data',
      columns: ['candidate', 'shell', 'structure (Å)', 'change (Å)', 'sd (Å)', 'z', 'detectable (Å)'],
      rows: candidates.flatMap(({ file, overlength }) =>
        overlength.shells.map(({ label, structureDistance, deltaR, sd, z, detectable }) => [
          file,
          label,
          structureDistance,
          deltaR,
          sd,
          z,
          detectable,
        ]),
      ),
    },
    {
      name: 'disorder',
      title: 'Disorder: predicted, and wanted by the data',
      columns: ['candidate', 'shell', 'N', 'mean R (Å)', 'thermal σ² (Å²)', 'static σ² (Å²)', 'wanted σ² (Å²)'],
      rows: candidates.flatMap(({ file, disorder }) =>
        disorder.map((row) => [file, row.label, row.count, row.meanDistance, row.thermal, row.static, row.wanted]),
      ),
    },
    {
      name: 'valence',
      title: 'Bond-valence sums',
      columns: ['candidate', 'site', 'oxidation state supposed', 'sum as given', 'sd', 'sum with the distances of the data', 'sd rescaled'],
      rows: candidates.flatMap(({ file, valence }) =>
        valence.flatMap(({ site, asGiven, rescaled }) =>
          asGiven.map(({ oxidationState, sum, sd }, i) => [file, site, oxidationState, sum, sd, rescaled[i]!.sum, rescaled[i]!.sd]),
        ),
      ),
    },
    {
      name: 'rivals',
      title: 'Rivals',
      columns: ['candidate', 'rival', 'kind', 'X', 'p', 'ln Z against the candidate', 'excluded'],
      rows: candidates.flatMap(({ file, rivals }) =>
        rivals.map(({ label, kind, x, p, logEvidence, excluded }) => [file, label, kind, x, p, logEvidence, excluded ? 'yes' : 'no']),
      ),
    },
  ];
}
