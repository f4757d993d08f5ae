/**
 * Who is bonded to whom, from covalent radii: d ≤ r_A + r_B + slack. Organic bonds scatter little (slack 0.4 Å, common practice, no
 * source); bonds to metals scatter with spin state and the Jahn–Teller effect and get 0.5 Å; hydrogens are never counted as ligands
 * of a metal unless as close as a hydride; metals are bonded to metals only where they touch (slack 0.2 Å).
 */
import { covalentRadius, elementBySymbol } from '../elements/index.js';
import type { Link, Site, SiteAtom } from './types.js';

/** Å: atoms on special positions are moved onto them, and no two images of an atom bond at lengths this near by chance only. */
const SAME_LENGTH = 0.1;

const NONMETALS = new Set('H He B C N O F Ne Si P S Cl Ar Ge As Se Br Kr Te I Xe At Rn'.split(' '));

export const isMetal = (element: string): boolean => !NONMETALS.has(element);

/** Longest bond between two elements, Å; 0 where a radius is not known. */
export function longestBond(one: string, other: string): number {
  const [a, b] = [elementBySymbol(one), elementBySymbol(other)];
  if (!(a.covalentRadius > 0 && b.covalentRadius > 0)) return 0;
  const sum = a.covalentRadius + b.covalentRadius;
  const metals = Number(isMetal(one)) + Number(isMetal(other));
  if (one === 'H' || other === 'H') return sum + 0.2;
  return sum + [0.4, 0.5, 0.2][metals]!;
}

/** Shortest distance that is chemically possible, Å: three quarters of the covalent sum (common practice, no source). */
export function shortestBond(one: string, other: string): number {
  return 0.75 * (covalentRadius(one) + covalentRadius(other));
}

/**
 * The atoms bonded to the absorber, nearest first.
 *
 * @param links  bonds the file states: they count even where they are longer than radii allow; the length tells the image meant
 */
export function coordinationShell(site: Site, links: readonly Link[] = []): readonly SiteAtom[] {
  const own = site.atoms[0]!.source;
  const lengths = new Map<number, number[]>();
  for (const {
    sources: [a, b],
    length,
  } of links) {
    if (a !== own && b !== own) continue;
    const other = a === own ? b : a;
    lengths.set(other, [...(lengths.get(other) ?? []), length]);
  }
  const isLinked = (atom: SiteAtom): boolean =>
    lengths.get(atom.source)?.some((length) => Math.abs(length - atom.distance) < SAME_LENGTH) ?? false;
  const shell = site.atoms.slice(1).filter((atom) => atom.distance <= longestBond(site.element, atom.element) || isLinked(atom));
  // With ligands present, a metal behind them is a neighbour, not a ligand (oxo-bridged pairs, 2.7 Å), unless the file says so.
  const ligands = shell.filter((atom) => !isMetal(atom.element) || isLinked(atom));
  return isMetal(site.element) && ligands.length > 0 ? ligands : shell;
}
