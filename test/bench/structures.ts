/**
 * Speed of the structure room: reading, neighbour search, streaming. Invented random input.
 *
 *   npx tsc -b && node --import tsx test/bench/structures.ts [--large]
 *
 * Prints one JSON line a measurement: median and least of the repeats, ms. `--large` adds 2 million atoms. Where the command gemmi
 * is installed its whole-process time on the same files stands beside; node's own start (empty script) is given for comparison.
 */
import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { type Atom, findSites, readStructure, type Structure, XyzFrames } from '@ringtrue/core';
import { seededRandom } from '../support/random.js';
import { writeMmcif, writePdb, writeXyz } from '../support/write-structures.js';

const random = seededRandom(1);
const folder = mkdtempSync(join(tmpdir(), 'ringtrue-bench-'));

function measure(name: string, repeats: number, work: () => unknown, note: Record<string, unknown> = {}): void {
  const times = Array.from({ length: repeats }, () => {
    const start = performance.now();
    if (work() === undefined) throw new Error('the result is used, so that the work is done');
    return performance.now() - start;
  });
  times.sort((a, b) => a - b);
  const round = (ms: number) => Math.round(ms * 10) / 10;
  console.log(JSON.stringify({ name, medianMs: round(times[repeats >> 1]!), leastMs: round(times[0]!), repeats, ...note }));
}

/** Random atoms of a protein-like mixture at 0.05 atoms per Å³, on a jittered lattice so that none coincide. */
function atomsOf(count: number): Atom[] {
  const side = Math.ceil(Math.cbrt(count));
  const step = Math.cbrt(1 / 0.05);
  const kinds = [
    ['N', 'N'],
    ['CA', 'C'],
    ['C', 'C'],
    ['O', 'O'],
    ['CB', 'C'],
    ['OD1', 'O'],
    ['CG', 'C'],
    ['CD', 'C'],
  ] as const;
  return Array.from({ length: count }, (_, i): Atom => {
    const [name, element] = i === count >> 1 ? (['ZN', 'Zn'] as const) : kinds[i % 8]!;
    const lattice = [i % side, Math.floor(i / side) % side, Math.floor(i / side / side)] as const;
    const residue = {
      name: 'ASP',
      number: 1 + (Math.floor(i / 8) % 9999),
      insertion: '',
      chain: 'ABCDEFGHIJKLMNOPQRSTUVWXYZ'.charAt(Math.floor(i / 79992) % 26),
    };
    return {
      name,
      element,
      position: lattice.map((n) => Number((step * (n + 0.4 * random())).toFixed(3))) as unknown as Atom['position'],
      occupancy: 1,
      residue,
    };
  });
}

const gemmi = (path: string) => execFileSync('gemmi', ['contents', path], { stdio: ['ignore', 'pipe', 'ignore'], maxBuffer: 1e9 });
let hasGemmi = true;
try {
  execFileSync('gemmi', ['--version'], { stdio: 'ignore' });
} catch {
  hasGemmi = false;
}

for (const count of process.argv.includes('--large') ? [100_000, 2_000_000] : [100_000]) {
  const atoms = atomsOf(count);
  for (const [format, text] of [
    ['pdb', writePdb(atoms).replaceAll('HETATM', 'ATOM  ')], // archives write polymers so, and gemmi is slower on HETATM
    ['mmcif', writeMmcif(atoms)],
  ] as const) {
    const path = join(folder, `${count}.${format === 'pdb' ? 'pdb' : 'cif'}`);
    writeFileSync(path, text);
    measure(`read ${format}`, count > 1e6 ? 1 : 7, () => readStructure(text).atoms.length, {
      atoms: count,
      megabytes: Math.round(text.length / 1e6),
      heapMb: Math.round(process.memoryUsage().heapUsed / 1e6),
    });
    if (hasGemmi) measure(`gemmi contents, ${format}`, count > 1e6 ? 1 : 5, () => gemmi(path), { atoms: count });
  }
}
measure('start of node alone', 5, () => execFileSync(process.execPath, ['-e', '0']));

for (const count of [1e3, 1e4, 1e5, 1e6]) {
  const structure: Structure = {
    format: 'xyz',
    title: '',
    atoms: atomsOf(count),
    moreFrames: [],
    operators: [{ rotation: [1, 0, 0, 0, 1, 0, 0, 0, 1], translation: [0, 0, 0], text: 'x,y,z' }],
    diagnostics: [],
  };
  measure('neighbour grid and one site of 6 Å', 3, () => findSites(structure, { absorber: 'Zn', radius: 6 })[0]!.atoms.length, {
    atoms: count,
  });
}

const frame = writeXyz(atomsOf(60), 'invented');
const chunk = frame.repeat(1000);
const reader = new XyzFrames();
measure('stream 1000 frames of 60 atoms', 20, () => reader.push(chunk).length, { framesAMeasurement: 1000 });
rmSync(folder, { recursive: true });
