/** Resolution, R values, completeness and reflections from the REMARK 2 and 3 lines of a PDB file. */
import type { RefinementStatistics } from './types.js';

type Key = 'resolution' | 'rWork' | 'rFree' | 'completeness' | 'reflections';

const PATTERNS: readonly (readonly [Key, RegExp])[] = [
  ['resolution', /^REMARK {3}2 RESOLUTION\.\s+([\d.]+)/],
  ['resolution', /^REMARK {3}3 {3}RESOLUTION RANGE HIGH \(ANGSTROMS\)\s*:\s*([\d.]+)/],
  ['completeness', /^REMARK {3}3 {3}COMPLETENESS (?:FOR RANGE|\(WORKING\+TEST\))\s*\(%\)\s*:\s*([\d.]+)/],
  ['reflections', /^REMARK {3}3 {3}NUMBER OF REFLECTIONS\s*:\s*(\d+)/],
  ['rWork', /^REMARK {3}3 {3}R VALUE\s+\(WORKING SET\)\s*:\s*([\d.]+)/],
  ['rFree', /^REMARK {3}3 {3}FREE R VALUE\s*:\s*([\d.]+)/],
];

export class PdbStatistics {
  private readonly found: Partial<Record<Key, number>> = {};
  private method = '';

  take(line: string): void {
    if (line.startsWith('EXPDTA')) {
      this.method ||= line.slice(10).trim();
      return;
    }
    for (const [key, pattern] of PATTERNS) {
      const value = Number(pattern.exec(line)?.[1] ?? Number.NaN);
      if (Number.isFinite(value) && this.found[key] === undefined) this.found[key] = key === 'completeness' ? value / 100 : value;
    }
  }

  result(): RefinementStatistics | undefined {
    const all = { ...this.found, ...(this.method ? { method: this.method } : {}) };
    return Object.keys(all).length > 0 ? all : undefined;
  }
}
