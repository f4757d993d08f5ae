/** The pictures of README and guide, from the program itself: `npm run pictures`. The invented structures and spectra, nothing measured. */
import { readFileSync, writeFileSync } from 'node:fs';
import { judge, readScan, readStructure, reduce } from '@ringtrue/core';
import { comparisonInR, overlengthChart, standalone } from '@ringtrue/figures';
import { DOCS } from './make-docs.js';

const read = (file: string): string => readFileSync(new URL(`../../demo-structures/${file}`, import.meta.url), 'utf8');
const file = 'oxidase-room-temperature.pdb';
const scans = [1, 2, 3].map((n) => readScan(read(`oxidase-scan-${n}.xdi`)));
const evidence = { file: 'oxidase scans (invented)', reduction: reduce(scans), absorber: 'Mn', temperature: 15 };
const { candidates, evidence: sets } = judge(
  [{ file, structure: readStructure(read(file), { fileName: file }) }],
  [evidence],
  {},
  { version: 'pictures' },
);
const [candidate] = candidates;
writeFileSync(`${DOCS}pictures/comparison.svg`, `${standalone(comparisonInR(candidate!.comparisons[0]!, sets[0]!))}\n`);
writeFileSync(`${DOCS}pictures/overlength.svg`, `${standalone(overlengthChart(file, candidate!.overlength))}\n`);
