/** From a site of the core to what is drawn of it. */
import { coordinationShell, type Link, longestBond, type PredictedShell, type Site, type SiteAtom } from '@ringtrue/core';
import type { DrawnAtom, SiteDrawing } from './site-drawing.js';

/** Å: another metal this near is drawn with its distance. */
const METAL_REACH = 3.2;

/**
 * The atoms bonded to the absorber, heavy scatterers close by, and the atoms bonded to these, without hydrogen.
 * @param shells  of the prediction: each neighbour gets its part of the share of the shell of its element nearest in distance
 */
export function sitePicture(site: Site, shells: readonly PredictedShell[] = [], links: readonly Link[] = []): SiteDrawing {
  const [absorber] = site.atoms as [SiteAtom, ...SiteAtom[]];
  const bonded = new Set(coordinationShell(site, links).filter(({ element }) => element !== 'H'));
  const first = site.atoms.filter(
    (atom) => bonded.has(atom) || (atom !== absorber && atom.distance < METAL_REACH && atom.element === absorber.element),
  );
  const isBond = (a: SiteAtom, b: SiteAtom): boolean => apart(a, b) < longestBond(a.element, b.element);
  const second = site.atoms.filter(
    (atom) =>
      atom !== absorber &&
      !first.includes(atom) &&
      atom.element !== 'H' &&
      atom.distance < 4 &&
      first.some((near) => near.element !== absorber.element && isBond(near, atom)),
  );
  const shown = [...first, ...second];
  const atoms = shown.map((atom): DrawnAtom => {
    const share = first.includes(atom) ? shareOf(atom, shells) : undefined;
    return {
      element: atom.element,
      label: labelOf(atom),
      position: atom.position,
      isNeighbour: first.includes(atom),
      occupancy: atom.occupancy,
      ...(share === undefined ? {} : { share }),
    };
  });
  const bonds: [number, number][] = [];
  shown.forEach((atom, i) => {
    if (bonded.has(atom)) bonds.push([-1, i]);
    for (let j = i + 1; j < shown.length; j++)
      if (isBond(atom, shown[j]!) && !(atom.element === absorber.element && shown[j]!.element === absorber.element)) bonds.push([i, j]);
  });
  return {
    absorber: { element: absorber.element, label: site.label, position: absorber.position, isNeighbour: false },
    atoms,
    bonds,
    caption: `${site.label}${shells.length > 0 ? '; in brackets, part of the signal' : ''}`,
  };
}

const apart = (a: SiteAtom, b: SiteAtom): number => Math.hypot(...a.position.map((value, axis) => value - b.position[axis]!));

const labelOf = ({ name, residue }: SiteAtom): string => (residue ? `${name} ${residue.name} ${residue.number}` : name);

function shareOf({ element, distance, occupancy }: SiteAtom, shells: readonly PredictedShell[]): number | undefined {
  const own = shells.filter((shell) => shell.element === element);
  if (own.length === 0) return undefined;
  const shell = own.reduce((best, next) => (Math.abs(next.meanDistance - distance) < Math.abs(best.meanDistance - distance) ? next : best));
  return (shell.share * occupancy) / shell.count;
}
