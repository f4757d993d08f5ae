/** CONECT records of a PDB file: bonds by the serial numbers of their atoms (format 3.3: five columns each, from column 7). */
import type { Diagnostic } from '../errors.js';
import { distance } from './cell.js';
import { Lines } from './lines.js';
import { LONGEST_LINK } from './pdb-links.js';
import type { Atom, Link } from './types.js';

const FIELDS = [6, 11, 16, 21, 26] as const;

export class PdbConnections {
  private readonly pairs: (readonly [string, string])[] = [];
  private firstLine = 0;

  /** @param record one CONECT line */
  take(record: string, line: number): void {
    this.firstLine ||= line;
    const [own, ...others] = FIELDS.map((from) => record.slice(from, from + 5).trim());
    for (const other of others) if (own && other) this.pairs.push([own, other]);
  }

  /** The bonds between atoms read. Serials that no atom or several atoms have, and atoms too far apart, are counted, said and left out. */
  resolve(text: string, atoms: readonly Atom[], diagnostics: Diagnostic[]): Link[] {
    if (this.pairs.length === 0) return [];
    const serials = serialNumbers(text, atoms);
    const links = new Map<string, Link>();
    const unknown = new Set<string>();
    const long = new Set<string>();
    for (const [one, other] of this.pairs) {
      const [a, b] = [serials.get(one), serials.get(other)];
      for (const [serial, source] of [
        [one, a],
        [other, b],
      ] as const)
        if (source === undefined || source === AMBIGUOUS) unknown.add(serial);
      if (a === undefined || b === undefined || a === AMBIGUOUS || b === AMBIGUOUS || a === b) continue;
      const sources: [number, number] = a < b ? [a, b] : [b, a];
      const length = distance(atoms[a]!.position, atoms[b]!.position);
      if (length > LONGEST_LINK) long.add(sources.join('–'));
      else links.set(sources.join('–'), { sources, length });
    }
    const say = (code: string, message: string) => diagnostics.push({ code, message, line: this.firstLine });
    if (unknown.size > 0)
      say(
        'conect-without-atom',
        `CONECT names ${unknown.size} serial numbers that no atom or several atoms have; these bonds are left out`,
      );
    if (long.size > 0)
      say(
        'conect-too-long',
        `CONECT joins ${long.size} pairs of atoms more than ${LONGEST_LINK} Å apart, which is no bond; they are left out`,
      );
    return [...links.values()];
  }
}

const AMBIGUOUS = -1;

/** Index of each atom by its serial as written. A second pass over the lines, so that files without CONECT pay nothing. */
function serialNumbers(text: string, atoms: readonly Atom[]): Map<string, number> {
  const serials = new Map<string, number>();
  const lines = new Lines(text);
  let next = 0;
  while (next < atoms.length && lines.next()) {
    if (lines.number !== atoms[next]!.line) continue;
    const serial = /^.{6}( *(?:\d+|[A-Za-z\d]{5}))/.exec(text.slice(lines.start, Math.min(lines.start + 14, lines.end)))?.[1]?.trim();
    if (serial !== undefined) serials.set(serial, serials.has(serial) ? AMBIGUOUS : next);
    next++;
  }
  return serials;
}
