/** What a reader of a site should be warned of before believing a spectrum computed from it. */
import type { Diagnostic } from '../errors.js';
import { coordinationShell, isMetal, shortestBond } from './bonding.js';
import { distance } from './cell.js';
import type { Site, SiteAtom, Structure } from './types.js';

/** Å: what happens within it shows in the spectrum. */
const VISIBLE = 5;

export function checkStructure({ atoms }: Structure): Diagnostic[] {
  const elements = new Set(atoms.map((atom) => atom.element));
  if (elements.has('C') && !elements.has('H')) {
    return [
      {
        code: 'no-hydrogens',
        message: 'the structure has carbon but no hydrogens; they scatter too weakly to matter here, but valences cannot be checked',
      },
    ];
  }
  return [];
}

export function checkSite(structure: Structure, site: Site): Diagnostic[] {
  const found: Diagnostic[] = [];
  const say = (code: string, message: string) => found.push({ code, message: `${site.label}: ${message}` });
  const others = site.atoms.slice(1);
  const near = others.filter((atom) => atom.distance <= VISIBLE);
  const name = (atom: SiteAtom) => `${atom.name}${atom.residue ? ` ${atom.residue.name} ${atom.residue.chain}${atom.residue.number}` : ''}`;

  const partial = near.filter((atom) => atom.occupancy < 0.995 && atom.element !== 'H');
  if (partial.length > 0) {
    const list = partial.slice(0, 4).map((atom) => `${name(atom)} ${atom.occupancy.toFixed(2)}`);
    say(
      'occupancy-below-one',
      `${partial.length} neighbours within ${VISIBLE} Å are partly occupied (${list.join(', ')}${partial.length > 4 ? ', …' : ''})`,
    );
  }
  if (site.atoms[0]!.occupancy < 0.995) say('absorber-partial', `the absorber itself has occupancy ${site.atoms[0]!.occupancy.toFixed(2)}`);

  const copy = near.find((atom) => atom.source === site.atoms[0]!.source);
  if (copy && copy.distance < shortestBond(site.element, site.element))
    say('symmetry-copy-close', `its own symmetry copy (${copy.symmetry}) is only ${copy.distance.toFixed(2)} Å away`);

  const crowded = tooClose(site.atoms.filter((atom) => atom.distance <= VISIBLE && atom.element !== 'H'));
  if (crowded) {
    const [a, b, apart] = crowded;
    say('close-neighbours', `${name(a)} and ${name(b)} are ${apart.toFixed(2)} Å apart, closer than chemistry allows`);
  }

  const shell = coordinationShell(site, structure.links);
  if (isMetal(site.element) && !shell.some((atom) => isMetal(atom.element))) {
    const linear = ['Cu', 'Ag', 'Au', 'Hg'].includes(site.element);
    const [x, y, z] = [0, 1, 2].map((axis) =>
      shell.reduce((sum, { position, distance: d }) => sum + (position[axis]! - site.atoms[0]!.position[axis]!) / d, 0),
    );
    const lopsided = Math.hypot(x!, y!, z!) / Math.max(1, shell.length);
    // A ligand missing from a tetrahedron leaves 1/3, half an octahedron 0.58; three in a plane leave nothing.
    if (shell.length < (linear ? 2 : 3) || (shell.length < 6 && lopsided > 0.45)) {
      say('truncated-coordination', `bonded neighbours: ${shell.length}, too few or all to one side; ligands may be missing from the file`);
    }
  }

  const isMolecular = !structure.cell || structure.format === 'pdb' || structure.format === 'mmcif';
  const partner = near.find((atom) => isMetal(atom.element) && atom.distance > 0);
  if (isMolecular && isMetal(site.element) && partner)
    say('two-metals', `another metal, ${name(partner)}, is ${partner.distance.toFixed(2)} Å away; its paths are part of the signal`);
  if (!site.periodic && site.radius === Infinity && others.length > 0 && others[others.length - 1]!.distance < VISIBLE) {
    say(
      'small-molecule',
      `the molecule ends ${others[others.length - 1]!.distance.toFixed(1)} Å from the absorber; solvent and packing beyond are not in the file`,
    );
  }
  if (others.length === 0) say('isolated-absorber', `no neighbour within ${site.radius === Infinity ? 'the file' : `${site.radius} Å`}`);
  return found;
}

function tooClose(atoms: readonly SiteAtom[]): [SiteAtom, SiteAtom, number] | undefined {
  for (let i = 0; i < atoms.length; i++) {
    for (let j = 0; j < i; j++) {
      const apart = distance(atoms[i]!.position, atoms[j]!.position);
      if (apart < 3 && apart < shortestBond(atoms[i]!.element, atoms[j]!.element)) return [atoms[j]!, atoms[i]!, apart];
    }
  }
  return undefined;
}
