/** What `predict` and `judge` share when they write a result: inputs by checksum, drawings of the sites, the folder itself. */
import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { basename } from 'node:path';
import {
  type Candidate,
  type Evidence,
  findSites,
  type JudgeOptions,
  type Prediction,
  predict,
  type Structure,
  suggestThermalModel,
  VERSION,
} from '@ringtrue/core';
import { type SiteDrawing, sitePicture } from '@ringtrue/figures';
import type { CandidateExtras, RunRecord } from '@ringtrue/report';
import { writeFolder } from './files.js';
import { toJson } from './json.js';
import { withPngs } from './png.js';
import { plain } from './terminal.js';

/** The command without the folders of its files, and each input file with its SHA-256. */
export function runRecord(inputs: readonly string[]): RunRecord {
  const words = process.argv.slice(2).map((word) => {
    const parts = word.split(',').map((part) => (inputs.includes(part) ? basename(part) : part));
    const safe = plain(inputs.includes(word) ? basename(word) : parts.join(','));
    return /^[\w.,:=+@%/-]+$/.test(safe) ? safe : `'${safe.replaceAll("'", "'\\''")}'`;
  });
  return {
    command: ['ringtrue', ...words].join(' '),
    inputs: inputs.map((file) => {
      const bytes = readFileSync(file);
      return { file: basename(file), bytes: bytes.length, sha256: createHash('sha256').update(bytes).digest('hex') };
    }),
  };
}

/** Å around the absorber: the second shell of what is drawn. */
const DRAWN = 5;

/** Every absorbing site but copies of one another. */
export function sitePictures(structure: Structure, { options, shells }: Prediction): SiteDrawing[] {
  const sites = findSites(structure, { absorber: options.absorber, radius: DRAWN });
  const one = new Map(sites.map((site) => [site.atoms[0]!.source, site]));
  return [...one.values()].map((site) => sitePicture(site, shells, structure.links ?? []));
}

/** Each candidate predicted under the options it was judged with, for the paths and parts of the report. */
export function candidateExtras(
  candidates: readonly Candidate[],
  evidence: readonly Evidence[],
  { thermal, rivals: _r, coordinateSd: _c, sampleSpread: _s, modelError: _m, sampling: _p, ...options }: JudgeOptions,
): Map<string, CandidateExtras> {
  const { absorber, edge, temperature } = evidence[0]!;
  return new Map(
    candidates.map(({ file, structure }) => {
      const [site] = findSites(structure, { absorber, radius: DRAWN });
      // As the judgement does: frames are judged by their first alone.
      const suggested = suggestThermalModel(site!, structure).model;
      const prediction = predict(
        structure,
        {
          ...options,
          absorber,
          ...(edge === undefined ? {} : { edge }),
          ...(temperature === undefined ? {} : { temperature }),
          thermal: thermal ?? (suggested === 'ensemble' ? 'springs' : suggested),
          bands: true,
        },
        { file, version: VERSION },
      );
      return [file, { prediction, sites: sitePictures(structure, prediction) }];
    }),
  );
}

/** Everything of a result in its folder, figures also as PNG where a resolution is given. */
export async function writeResult(
  folder: string,
  report: ReadonlyMap<string, string>,
  result: unknown,
  png: number | undefined,
): Promise<void> {
  const files = new Map(png === undefined ? report : await withPngs(report, png));
  files.set('result.json', `${toJson(result)}\n`);
  writeFolder(folder, files);
}
