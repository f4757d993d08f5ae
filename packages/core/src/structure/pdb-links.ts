/** LINK records of a PDB file: bonds its author states, which distances alone might not show (format 3.3, columns as there). */
import type { Diagnostic } from '../errors.js';
import type { Atom, Link } from './types.js';

/** A stated bond longer than this, Å, is a slip of the file and not a bond. */
export const LONGEST_LINK = 4;

interface LinkEnd {
  readonly name: string;
  readonly alternate: string;
  readonly residue: string;
  readonly chain: string;
  /** Residue number as written, and the insertion code. */
  readonly number: string;
  /** "1555" is the atom itself; another symmetry operation otherwise. */
  readonly symmetry: string;
}

interface LinkRecord {
  readonly ends: readonly [LinkEnd, LinkEnd];
  readonly line: number;
}

export class PdbLinks {
  private readonly records: LinkRecord[] = [];

  /** @param text one LINK line */
  take(text: string, line: number): void {
    const field = (from: number, to: number): string => text.slice(from - 1, to).trim();
    const end = (at: number, symmetry: readonly [number, number]): LinkEnd => ({
      name: field(at, at + 3),
      alternate: field(at + 4, at + 4),
      residue: field(at + 5, at + 7),
      chain: field(at + 9, at + 9),
      number: field(at + 10, at + 14).replace(/\s/g, ''),
      symmetry: field(...symmetry) || '1555',
    });
    this.records.push({ ends: [end(13, [60, 65]), end(43, [67, 72])], line });
  }

  /** The links between the atoms read; what names no atom, or atoms too far apart, is said and left out. */
  resolve(atoms: readonly Atom[], diagnostics: Diagnostic[]): Link[] {
    if (this.records.length === 0) return [];
    const byPlace = new Map<string, number[]>();
    atoms.forEach(({ name, residue }, source) => {
      if (!residue) return;
      const place = `${name}|${residue.name}|${residue.chain}|${residue.number}${residue.insertion}`;
      byPlace.set(place, [...(byPlace.get(place) ?? []), source]);
    });
    return this.records.flatMap(({ ends, line }) => {
      const [first, second] = ends.map(({ name, residue, chain, number, alternate }) => {
        const found = byPlace.get(`${name}|${residue}|${chain}|${number}`) ?? [];
        return alternate === '' ? found : found.filter((source) => atoms[source]!.alternate === alternate);
      });
      const words = ends.map(({ name, residue, chain, number }) => `${name} ${residue} ${chain}${number}`).join(' and ');
      if (!first?.length || !second?.length) {
        diagnostics.push({
          code: 'link-without-atoms',
          message: `LINK between ${words}: one of the two is not in the file; the link is left out`,
          line,
        });
        return [];
      }
      const links = first.flatMap((a) => second.map((b): Link => ({ sources: [a, b] })));
      if (ends[0].symmetry !== ends[1].symmetry) return links;
      const near = links.filter(({ sources: [a, b] }) => apart(atoms[a]!, atoms[b]!) <= LONGEST_LINK);
      if (near.length === 0) {
        const length = apart(atoms[first[0]!]!, atoms[second[0]!]!).toFixed(1);
        diagnostics.push({
          code: 'link-too-long',
          message: `LINK between ${words}: they are ${length} Å apart, which is no bond; the link is left out`,
          line,
        });
      }
      return near;
    });
  }
}

const apart = ({ position: p }: Atom, { position: q }: Atom): number => Math.hypot(p[0] - q[0], p[1] - q[1], p[2] - q[2]);
