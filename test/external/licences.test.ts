// What ships: pinned, free to pass on, and listed. Identifiers: SPDX licence list, spdx.org/licenses.
import { readFileSync } from 'node:fs';
import { expect, test } from 'vitest';
import { LICENCES, licencesText, shippedLibraries } from '../support/licences.js';

/** Permissive ones: they ask for their notice to be kept, no more. */
const FREE = /^(MIT|Apache-2\.0|BSD-[23]-Clause|ISC|0BSD|CC0-1\.0|\(MIT OR [A-Z0-9.-]+\))$/;

/**
 * MPL 2.0 (mozilla.org/MPL/2.0) asks for the source of its own files alone (section 3.2), not for that of what uses them: the renderer of
 * PNGs, in the command line only, unchanged, as its own package.
 */
const OWN_FILES_ONLY = /^@resvg\/resvg-js(-|$)/;

test('LICENCES.md is what the lock file says', () => {
  expect(readFileSync(LICENCES, 'utf8')).toBe(licencesText());
});

test('every library that ships has a permissive licence and a fixed version', () => {
  const shipped = shippedLibraries();
  expect(shipped.map(({ name }) => name)).toContain('fft.js');
  for (const { name, version, licence } of shipped) {
    if (OWN_FILES_ONLY.test(name)) expect(licence, name).toBe('MPL-2.0');
    else expect(licence, name).toMatch(FREE);
    expect(version, name).toMatch(/^\d+\.\d+\.\d+/);
  }
  for (const folder of ['packages/core', 'packages/cli', 'packages/figures', 'packages/report', 'apps/web']) {
    const { dependencies = {} } = JSON.parse(readFileSync(new URL(`../../${folder}/package.json`, import.meta.url), 'utf8')) as {
      dependencies?: Record<string, string>;
    };
    for (const [name, version] of Object.entries(dependencies)) expect(version, `${folder}: ${name}`).toMatch(/^\d+\.\d+\.\d+$/);
  }
});
