// Files cut short, with lines lost, doubled or swapped, and with characters changed: every one must end as a structure of finite
// numbers or as an error of ours with one line of text; never another exception, never NaN.
import { readdirSync, readFileSync } from 'node:fs';
import { findSites, InputError, ReadError, readStructure } from '@ringtrue/core';
import { expect, test } from 'vitest';
import { seededRandom } from '../support/random.js';

const folders = ['./structures/', './crystals/'].map((name) => new URL(name, import.meta.url));
const texts = folders.flatMap((folder) =>
  readdirSync(folder)
    .filter((file) => /\.(pdb|mmcif|cif|xyz)$/.test(file))
    .map((file) => [file, readFileSync(new URL(file, folder), 'utf8')] as const),
);
const SPICE = [
  '\0',
  '\t',
  '\r',
  '\n',
  ' ',
  '"',
  "'",
  ';',
  '#',
  '_',
  '-',
  '.',
  ',',
  '(',
  ')',
  '9',
  '1e999',
  'nan',
  'loop_',
  'data_',
  'é',
  '\uFEFF',
  '?',
  'x',
  '/0',
  'END\n',
];

function spoiled(text: string, random: () => number): string {
  const at = Math.floor(random() * (text.length + 1));
  const pick = <T>(list: readonly T[]): T => list[Math.floor(random() * list.length)]!;
  switch (Math.floor(random() * 5)) {
    case 0:
      return text.slice(0, at);
    case 1:
      return text.slice(0, at) + pick(SPICE) + text.slice(at);
    case 2:
      return text.slice(0, at) + pick(SPICE) + text.slice(at + 1 + Math.floor(random() * 6));
    case 3: {
      const lines = text.split('\n');
      lines.splice(Math.floor(random() * lines.length), Math.floor(random() * 3), ...(random() < 0.5 ? [pick(lines)] : []));
      return lines.join('\n');
    }
    default: {
      const lines = text.split('\n');
      const i = Math.floor(random() * lines.length);
      const j = Math.floor(random() * lines.length);
      [lines[i], lines[j]] = [lines[j]!, lines[i]!];
      return lines.join('\n');
    }
  }
}

test('4000 spoiled files', () => {
  const random = seededRandom(99);
  let read = 0;
  let refused = 0;
  for (let run = 0; run < 4000; run++) {
    const [file, original] = texts[run % texts.length]!;
    let text = original;
    for (let times = 1 + Math.floor(random() * 3); times > 0; times--) text = spoiled(text, random);
    try {
      const structure = readStructure(text);
      read++;
      for (const atom of [structure.atoms, ...structure.moreFrames].flat()) {
        if (!atom.position.every(Number.isFinite) || !(atom.occupancy >= 0 && atom.occupancy <= 1))
          expect.fail(`${file}: ${JSON.stringify(atom)}`);
      }
      for (const site of findSites(structure, { radius: 4 })) {
        if (!site.atoms.every((atom) => Number.isFinite(atom.distance)) || !(site.weight > 0 && site.weight <= 1 + 1e-12))
          expect.fail(`${file}: ${site.label}`);
      }
    } catch (error) {
      if (!(error instanceof ReadError || error instanceof InputError)) {
        throw new Error(`${file}, run ${run}: ${(error as Error).stack}\n${text.slice(0, 2000)}`);
      }
      expect(error.message).not.toMatch(/undefined|NaN Å|\n.*\n.*\n/);
      refused++;
    }
  }
  // Both ends are reached, or the spoiling does not test what it says.
  expect(read).toBeGreaterThan(800);
  expect(refused).toBeGreaterThan(500);
});
