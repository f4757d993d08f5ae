/** What hostile text is thrown at, and what must hold whatever it was. */
import {
  describeSites,
  findSites,
  InputError,
  ReadError,
  readScan,
  readStructure,
  reduce,
  type Structure,
  XyzFrames,
} from '@ringtrue/core';
import type * as fc from 'fast-check';
import { SCANS, STRUCTURES } from './corpus.js';
import { type Input, scanInputs, structureInputs } from './inputs.js';

export type Outcome = 'read' | 'refused';

export interface Target {
  readonly inputs: fc.Arbitrary<Input>;
  /** @throws {Error} anything that must not happen */
  readonly run: (text: string) => Outcome;
}

const OWN_NAMES = Object.getOwnPropertyNames(Object.prototype).join();

function guarded(work: () => void): Outcome {
  let outcome: Outcome = 'read';
  try {
    work();
  } catch (error) {
    if (!(error instanceof ReadError || error instanceof InputError)) throw error;
    if (/undefined|\bNaN Å|\[object/.test(error.message) || error.message.length > 600)
      throw new Error(`no message for a reader: ${error.message}`);
    outcome = 'refused';
  }
  if (Object.getOwnPropertyNames(Object.prototype).join() !== OWN_NAMES || Object.keys({}).length > 0)
    throw new Error('Object.prototype has changed');
  return outcome;
}

function insist(holds: boolean, what: string): void {
  if (!holds) throw new Error(what);
}

const allFinite = (values: ArrayLike<number>): boolean => Array.prototype.every.call(values, Number.isFinite);

function checkAtoms(structure: Structure): void {
  for (const { position, occupancy, element } of [structure.atoms, ...structure.moreFrames].flat()) {
    insist(allFinite(position), 'a position is no number');
    insist(occupancy >= 0 && occupancy <= 1, `occupancy ${occupancy}`);
    insist(/^[A-Z][a-z]?$/.test(element), `element ${element}`);
  }
}

const structure: Target = {
  inputs: structureInputs(STRUCTURES),
  run: (text) =>
    guarded(() => {
      const structure = readStructure(text);
      checkAtoms(structure);
      let total = 0;
      for (const site of findSites(structure, { radius: 4, absorber: structure.atoms[0]!.element })) {
        total += site.weight;
        insist(site.weight > 0, `weight ${site.weight}`);
        insist(
          site.atoms.every(({ distance }) => Number.isFinite(distance)),
          'a distance is no number',
        );
      }
      insist(Math.abs(total - 1) < 1e-9, `weights add up to ${total}`);
      JSON.stringify(describeSites(structure, { radius: 3 }));
    }),
};

/** The same text in pieces must give the same atoms, or the same refusal. */
const stream: Target = {
  inputs: structureInputs(STRUCTURES.filter(({ name }) => name.endsWith('.xyz'))),
  run: (text) => {
    const frames = (pieces: number): string => {
      let out = '';
      const outcome = guarded(() => {
        const reader = new XyzFrames();
        const size = Math.ceil(text.length / pieces) || 1;
        for (let at = 0; at < text.length; at += size)
          out += JSON.stringify(reader.push(text.slice(at, at + size)).map(({ atoms }) => atoms)).replace(/^\[|\]$/g, ',');
        out += JSON.stringify(reader.end().map(({ atoms }) => atoms)).replace(/^\[|\]$/g, ',');
      });
      return outcome + (outcome === 'read' ? out.replace(/,+/g, ',') : '');
    };
    const whole = frames(1);
    insist(whole === frames(7), 'text in seven pieces reads otherwise');
    return whole.startsWith('read') ? 'read' : 'refused';
  },
};

const scan: Target = {
  inputs: scanInputs(SCANS),
  run: (text) =>
    guarded(() => {
      const scan = readScan(text, { element: 'Fe' });
      const x = scan.kind === 'chi' ? scan.k : scan.energyEv;
      insist(allFinite(x) && allFinite(scan.kind === 'chi' ? scan.chi : scan.mu), 'a point is no number');
      insist(
        x.every((value, i) => i === 0 || value > x[i - 1]!),
        'the abscissa does not rise',
      );
      const { k, chi, sigmaChi } = reduce([scan]);
      insist(allFinite(k) && allFinite(chi), 'chi is no number');
      insist(
        sigmaChi.every((value) => value >= 0),
        'sigma of chi is no number',
      );
    }),
};

export const TARGETS = { structure, stream, scan } as const;
export type TargetName = keyof typeof TARGETS;
