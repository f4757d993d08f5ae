/** LINK records of a PDB file: bonds its author states, which distances alone might not show (format 3.3, columns as there). */
import type { Diagnostic } from '../errors.js';
import { cellGeometry, distance, transform } from './cell.js';
import type { Atom, Cell, Link, SymmetryOperator, Vec3 } from './types.js';

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
  /** Å, as stated; NaN where it is not. */
  readonly length: number;
  readonly line: number;
}

/** What repeats the atoms of a file. */
interface Crystal {
  readonly cell: Cell;
  readonly operators: readonly SymmetryOperator[];
}

/** Å: a stated length names the image it belongs to this well. */
const SAME_LENGTH = 0.1;

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
    this.records.push({ ends: [end(13, [60, 65]), end(43, [67, 72])], length: Number(field(74, 78) || Number.NaN), line });
  }

  /**
   * The links between the atoms read; what names no atom, or atoms too far apart, is said and left out. A link to a symmetry copy
   * goes to the image at the stated length, else to the nearest: operators are numbered by the file's own list, positions are not.
   */
  resolve(atoms: readonly Atom[], crystal: Crystal | undefined, diagnostics: Diagnostic[]): Link[] {
    if (this.records.length === 0) return [];
    const byPlace = new Map<string, number[]>();
    atoms.forEach(({ name, residue }, source) => {
      if (!residue) return;
      const place = `${name}|${residue.name}|${residue.chain}|${residue.number}${residue.insertion}`;
      byPlace.set(place, [...(byPlace.get(place) ?? []), source]);
    });
    return this.records.flatMap(({ ends, length, line }) => {
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
      const isCopy = ends[0].symmetry !== ends[1].symmetry && crystal !== undefined;
      const links = first.flatMap((a) =>
        second.map((b): Link => {
          const [from, to] = [atoms[a]!.position, atoms[b]!.position];
          return { sources: [a, b], length: isCopy ? imageDistance(from, to, crystal, length) : distance(from, to) };
        }),
      );
      const near = links.filter((one) => one.length <= LONGEST_LINK);
      if (near.length === 0) {
        diagnostics.push({
          code: 'link-too-long',
          message: `LINK between ${words}: they are ${links[0]!.length.toFixed(1)} Å apart${isCopy ? ' at the nearest' : ''}, which is no bond; the link is left out`,
          line,
        });
      }
      return near;
    });
  }
}

/** Å between an atom and an image of another that is not the other itself: the image whose distance was stated, else the nearest. */
function imageDistance(from: Vec3, to: Vec3, { cell, operators }: Crystal, stated: number): number {
  const { toCartesian, toFractional } = cellGeometry(cell);
  const [f, g] = [transform(toFractional, from), transform(toFractional, to)];
  let nearest = Infinity;
  for (const { rotation: m, translation: t } of operators) {
    const delta = [0, 1, 2].map((i) => m[3 * i]! * g[0] + m[3 * i + 1]! * g[1] + m[3 * i + 2]! * g[2] + t[i]! - f[i]!);
    const base = delta.map((x) => x - Math.round(x));
    // The nearest in a skewed cell may lie one translation on.
    for (let n = 0; n < 27; n++) {
      const shift = [(n % 3) - 1, (Math.floor(n / 3) % 3) - 1, Math.floor(n / 9) - 1];
      const image = base.map((x, i) => x + shift[i]!) as unknown as Vec3;
      if (m[0] === 1 && m[4] === 1 && m[8] === 1 && image.every((x, i) => Math.abs(x - (g[i]! - f[i]!)) < 1e-6)) continue;
      const apart = Math.hypot(...transform(toCartesian, image));
      if (Math.abs(apart - stated) <= SAME_LENGTH) return apart;
      nearest = Math.min(nearest, apart);
    }
  }
  return nearest;
}
