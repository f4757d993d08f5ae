/** Every JSON document against its published schema. JSON Schema draft 2020-12; made by `UPDATE_SCHEMAS=1 npx vitest run test/cli/json-schema`. */
import { mkdtempSync, readFileSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, test } from 'vitest';
import { jsonSchema, SCHEMAS } from '../../packages/report/src/schema/index.js';
import { ringtrue } from '../support/ringtrue.js';

type Command = keyof typeof SCHEMAS;
const D = 'demo-structures/';
const SCANS = [1, 2, 3].map((n) => `${D}redoxin-scan-${n}.dat`);
/** Frames for an average: invented, as all of the demo. */
const trajectory = join(mkdtempSync(join(tmpdir(), 'schema-')), 'frames.xyz');
writeFileSync(trajectory, [2.28, 2.3, 2.31, 2.33].map((r) => `3\ninvented\nFe 0 0 0\nS ${r} 0 0\nS -${r} 0.1 0\n`).join(''));

const runs: [Command, string[]][] = [
  ['predict', [`${D}redoxin-site.xyz`, '--absorber', 'Fe', '--path-signals']],
  ['predict', [`${D}redoxin.pdb`, '--absorber', 'Fe', '--debye-temperature', '400']],
  ['predict', [trajectory, '--absorber', 'Fe', '--ensemble', '--jobs', '1']],
  ['judge', [`${D}redoxin-site.xyz`, '--data', `${D}redoxin-chi.dat`, '--absorber', 'Fe', '--temperature', '15', '--rivals']],
  ['sites', [`${D}oxidase-low-dose.cif`]],
  ['sites', [`${D}tideglass.cif`, '--absorber', 'Mn']],
  ['reduce', SCANS.concat('--element', 'Fe')],
  ['reduce', [`${D}redoxin-chi.dat`]],
  ['dose', SCANS.concat('--element', 'Fe')],
  ['dose', SCANS.slice(0, 2).concat('--element', 'Fe')],
];

test.each(runs)('%s %s', (command, args) => {
  const { out, err, code } = ringtrue(command, ...args, '--json');
  expect(code, err).toBe(0);
  const { success, error } = SCHEMAS[command].safeParse(JSON.parse(out));
  expect(success, error?.message).toBe(true);
});

test.each(Object.keys(SCHEMAS) as Command[])('the published schema of %s is what is checked', (command) => {
  const file = new URL(`../../packages/report/schema/${command}.json`, import.meta.url);
  if (process.env['UPDATE_SCHEMAS']) writeFileSync(file, jsonSchema(command));
  expect(readFileSync(file, 'utf8')).toBe(jsonSchema(command));
});

test('what is not described is a fault', () => {
  const { out } = ringtrue('dose', ...SCANS, '--element', 'Fe', '--json');
  expect(SCHEMAS.dose.safeParse({ ...JSON.parse(out), surprise: 1 }).success).toBe(false);
});
