/** From a Structure to its absorbing sites: each different surrounding of the absorber once, with the weight the measurement gives it. */
import { elementBySymbol, elementSymbol, hasEdge } from '../elements/index.js';
import { type Diagnostic, InputError } from '../errors.js';
import { isMetal } from './bonding.js';
import { distance } from './cell.js';
import { type Combination, combinations, type Disorder, findDisorder } from './disorder-groups.js';
import { type Image, Images } from './images.js';
import { type LocalDisorder, localDisorder } from './orientations.js';
import { checkSite, checkStructure } from './site-checks.js';
import type { Atom, Site, SiteAtom, Structure } from './types.js';

export interface SiteOptions {
  /** Element symbol (all its atoms, averaged) or one atom by name or label; absent: every element that has an edge, metals first. */
  readonly absorber?: string;
  /** Total radius of the clusters, Å; potentials want 7 Å more than the longest path. */
  readonly radius: number;
  /** Å: alternate conformations this near are all combined; farther ones show the likeliest. Default: radius, at most 6. */
  readonly variantRadius?: number;
  /** Keep atoms listed apart as sites of their own though their surroundings are alike: polarised light sees them from other sides. */
  readonly keepOrientations?: boolean;
  /** Most combinations of alternates kept a site, the likeliest ones. Default 32. */
  readonly maxVariants?: number;
}

/** Half a gigabyte of neighbours. */
const MOST_CLUSTER_ATOMS = 3e6;
/** More different sites than this are no question EXAFS answers, and a minute of work for the list alone. */
const MOST_SITES = 5000;
/** Diagnostics of the whole structure repeated with every site. */
const MOST_SHARED = 40;
/** So many may be listed before one more is judged hopeless. */
const SOME_CLUSTER_ATOMS = 3e4;

/** Å: two atoms this close cannot both be there. */
const TOO_CLOSE = 0.5;

/**
 * The absorbing sites and their clusters, weights summing to 1 over each absorbing element. Atoms equivalent by symmetry are one
 * site; so are atoms of a crystal listed apart but with the same surroundings to 0.0005 Å. Alternate conformations give one site
 * a combination (`variant`), weighted by occupancy. Cost: linear in the atoms of the cell, plus the atoms found.
 *
 * @throws {InputError} absorber not present, atoms closer than 0.5 Å, no element with an edge, radius not above 0
 */
export function findSites(structure: Structure, options: SiteOptions): readonly Site[] {
  const { radius } = options;
  if (!(radius > 0 && radius < Infinity)) throw new InputError(`the cluster radius is ${radius} Å; it must be above 0`);
  const images = new Images(structure);
  const disorder = findDisorder(structure, images);
  const shared = fewOf([...images.diagnostics, ...checkStructure(structure)]);
  const sites: Site[] = [];
  for (const sources of chooseAbsorbers(structure, options.absorber)) {
    if (!images.isCrystal) checkCount(sources.length, structure.atoms[sources[0]!]!);
    const found: Site[] = [];
    let atoms = 0;
    for (const [done, source] of sources.entries()) {
      for (const site of sitesOf(structure, source, images, disorder, options, shared)) {
        found.push(site);
        atoms += site.atoms.length;
      }
      // Judged from the first few, so that a hopeless wish is refused at once and not when the memory is full.
      if ((done >= 20 || atoms > SOME_CLUSTER_ATOMS) && (atoms / (done + 1)) * sources.length > MOST_CLUSTER_ATOMS) {
        throw new InputError(
          `${sources.length} absorbing ${structure.atoms[source]!.element} atoms with their surroundings to ${radius} Å are more than can be held; ` +
            `choose one by its label, like "${atomLabel(structure.atoms[source]!)}", or a smaller radius`,
        );
      }
    }
    const merged = images.isCrystal && !options.keepOrientations ? mergeEquivalent(found) : found;
    if (images.isCrystal) checkCount(new Set(merged.map(({ atoms: [own] }) => own!.source)).size, structure.atoms[sources[0]!]!);
    for (const site of normalised(merged)) sites.push(site);
  }
  return sites;
}

function checkCount(count: number, first: Atom): void {
  if (count <= MOST_SITES) return;
  throw new InputError(
    `${count} absorbing ${first.element} atoms in different surroundings are more than the ${MOST_SITES} that are listed; choose one by its label, like "${atomLabel(first)}"`,
  );
}

/** Nothing is lost in silence: what is left out is counted. */
function fewOf(diagnostics: readonly Diagnostic[]): Diagnostic[] {
  if (diagnostics.length <= MOST_SHARED) return [...diagnostics];
  const left = diagnostics.length - MOST_SHARED;
  return [...diagnostics.slice(0, MOST_SHARED), { code: 'more-diagnostics', message: `${left} more remarks like these on the structure` }];
}

/** A structure whose present atoms are those of a later frame (xyz) or model (pdb, mmcif); 0 is the first. */
export function frameOf(structure: Structure, frame: number): Structure {
  if (frame === 0) return structure;
  const atoms = structure.moreFrames[frame - 1];
  if (!atoms) throw new InputError(`there is no frame ${frame + 1}; the file has ${structure.moreFrames.length + 1}`);
  return { ...structure, atoms };
}

/** What a chemist calls an atom: "Fe1", or "ZN ZN A201" in a macromolecule. */
export function atomLabel(atom: Atom): string {
  const { residue } = atom;
  if (!residue) return atom.name;
  return `${atom.name} ${residue.name} ${residue.chain}${residue.number}${residue.insertion}`;
}

/** Indices of the absorbing atoms, one list an element. */
function chooseAbsorbers({ atoms }: Structure, absorber: string | undefined): number[][] {
  const byElement = new Map<string, number[]>();
  atoms.forEach((atom, source) => {
    if (atom.occupancy === 0) return;
    const list = byElement.get(atom.element);
    if (list) list.push(source);
    else byElement.set(atom.element, [source]);
  });
  if (absorber === undefined) {
    const elements = [...byElement.keys()].filter((element) => hasEdge(elementBySymbol(element).Z));
    if (elements.length === 0)
      throw new InputError(`no element here has an edge for EXAFS (Na or heavier); there are ${[...byElement.keys()].join(', ')}`);
    const rank = (element: string) => (isMetal(element) ? 1000 : 0) + elementBySymbol(element).Z;
    return elements.sort((a, b) => rank(b) - rank(a)).map((element) => byElement.get(element)!);
  }
  const wanted = absorber.trim();
  const exact = byElement.get(wanted);
  if (exact) return [exact];
  const labelled = atoms.flatMap((atom, source) =>
    atom.occupancy > 0 && (atomLabel(atom) === wanted || atom.name === wanted) ? [source] : [],
  );
  const labelledElements = new Set(labelled.map((source) => atoms[source]!.element));
  if (labelled.length > 0 && labelledElements.size === 1) return [labelled];
  const element = byElement.get(elementSymbol(wanted) ?? '');
  if (element) return [element];
  if (labelled.length > 0)
    throw new InputError(
      `"${wanted}" names atoms of several elements (${[...labelledElements].join(', ')}); give the full label, like "${atomLabel(atoms[labelled[0]!]!)}"`,
    );
  throw new InputError(
    `there is no ${wanted} in the structure: neither an element nor an atom label; it holds ${[...byElement.keys()].join(', ')}`,
  );
}

function sitesOf(
  structure: Structure,
  source: number,
  images: Images,
  disorder: Disorder,
  options: SiteOptions,
  shared: readonly Diagnostic[],
): Site[] {
  const { radius, variantRadius = Math.min(radius, 6), maxVariants = 32 } = options;
  const { atoms } = structure;
  const absorber = atoms[source]!;
  const centre = images.position(source);
  const around = images.around(centre, radius).filter((image) => images.occupancy[image.source]! > 0);
  const own = around.find((image) => image.source === source && image.distance < 1e-6)!;
  const local = localDisorder(disorder, atoms, images, around);
  const group = local.groupOf(own);
  const isLabelled = group >= 0 && absorber.alternate !== undefined;
  const fixed = isLabelled ? { group, label: local.labelOf(own) } : undefined;
  // On the absorber's own spot sits whoever replaces it elsewhere; that one is no choice.
  const others = around.filter((image) => image !== own && !sharesSpot(image, own, images));
  const { list, dropped } = combinations(local, isLabelled ? [own, ...others] : others, variantRadius, fixed, maxVariants);
  const density = images.density(atoms);
  const isWhole = !images.isCrystal && around.length === atoms.reduce((n, _, i) => n + Number(images.occupancy[i]! > 0), 0);
  const diagnostics = [...shared];
  if (dropped > 1e-9) {
    diagnostics.push({
      code: 'variants-dropped',
      message: `${atomLabel(absorber)}: only the ${list.length} likeliest combinations of alternate conformations are kept, ${(100 * (1 - dropped)).toFixed(0)} % of the whole`,
    });
  }
  return list.map((combination) => {
    const said: Diagnostic[] = [];
    const neighbours = pickAtoms(structure, others, own, combination, local, images, said);
    const self: SiteAtom = {
      ...siteAtom(absorber, own, occupancyOf(own, local, images, fixed !== undefined)),
      symmetry: 'x,y,z',
      distance: 0,
    };
    const site: Site = {
      label: atomLabel(absorber) + (absorber.alternate === undefined ? '' : ` (${absorber.alternate})`),
      element: absorber.element,
      weight: (images.multiplicity[source]! * images.occupancy[source]! * combination.weight) / (1 - dropped),
      atoms: [self, ...neighbours],
      radius: isWhole ? Infinity : radius,
      ...(combination.name ? { variant: combination.name } : {}),
      periodic: images.isCrystal,
      ...(density === undefined ? {} : { atomDensity: density }),
      diagnostics: [...diagnostics, ...said],
    };
    return { ...site, diagnostics: [...site.diagnostics, ...checkSite(structure, site)] };
  });
}

/** The atoms of one combination, by distance; what cannot be together is sorted out or refused. */
function pickAtoms(
  structure: Structure,
  around: readonly Image[],
  own: Image,
  { labels }: Combination,
  local: LocalDisorder,
  images: Images,
  diagnostics: Diagnostic[],
): SiteAtom[] {
  const { atoms } = structure;
  const chosen: SiteAtom[] = [];
  for (const image of around) {
    const group = local.groupOf(image);
    if (group >= 0 && labels.get(group) !== local.labelOf(image)) continue;
    chosen.push(siteAtom(atoms[image.source]!, image, occupancyOf(image, local, images, group >= 0)));
  }
  const absorber = siteAtom(atoms[own.source]!, own, 1);
  return resolveOverlaps(structure, absorber, sortAtoms(chosen), diagnostics);
}

/** Whether an image cannot be there together with the partly occupied absorber, being on its spot. */
const sharesSpot = (image: Image, own: Image, { occupancy }: Images): boolean =>
  occupancy[own.source]! < 1 && image.distance < 0.8 && occupancy[image.source]! + occupancy[own.source]! <= 1.05;

/** A chosen alternate stands for its whole group: 0.6 of A and 0.4 of B are, in variant A, an atom fully there. */
function occupancyOf(image: Image, { groups, groupOf }: LocalDisorder, images: Images, isChosen: boolean): number {
  const group = groupOf(image);
  if (!isChosen || group < 0) return images.occupancy[image.source]!;
  return Math.min(
    1,
    groups[group]!.weights.reduce((sum, weight) => sum + weight, 0),
  );
}

function siteAtom(atom: Atom, image: Image, occupancy: number): SiteAtom {
  return {
    element: atom.element,
    name: atom.name,
    position: image.position,
    distance: image.distance,
    occupancy,
    source: image.source,
    symmetry: image.symmetry,
    ...(atom.uIso === undefined ? {} : { uIso: atom.uIso }),
    ...(atom.residue ? { residue: atom.residue } : {}),
  };
}

/** By distance, ties (to 1e-6 Å) by source and symmetry, so that the same site lists alike whatever the rounding. */
function sortAtoms(atoms: SiteAtom[]): SiteAtom[] {
  const rank = (atom: SiteAtom) => Math.round(atom.distance * 1e6);
  return atoms.sort((a, b) => rank(a) - rank(b) || a.source - b.source || (a.symmetry < b.symmetry ? -1 : 1));
}

function resolveOverlaps(structure: Structure, absorber: SiteAtom, atoms: SiteAtom[], diagnostics: Diagnostic[]): SiteAtom[] {
  const out = new Set<SiteAtom>();
  const extra = new Map<SiteAtom, number>();
  const byX = [absorber, ...atoms].sort((a, b) => a.position[0] - b.position[0]);
  for (let i = 0; i < byX.length; i++) {
    for (let j = i + 1; !out.has(byX[i]!) && j < byX.length && byX[j]!.position[0] - byX[i]!.position[0] < TOO_CLOSE; j++) {
      const pair = [byX[i]!, byX[j]!] as const;
      const apart = distance(pair[0].position, pair[1].position);
      if (apart >= TOO_CLOSE || out.has(pair[0]) || out.has(pair[1])) continue;
      const [kept, lost] = pair[0].distance <= pair[1].distance ? pair : [pair[1], pair[0]];
      const isSame = kept.element === lost.element && kept.name === lost.name && apart < 0.01;
      if (isSame) {
        diagnostics.push({ code: 'duplicate-atom', message: `${describe(structure, lost)} occurs twice at the same place; one is used` });
      } else if (kept.occupancy + lost.occupancy <= 1.05) {
        extra.set(kept, (extra.get(kept) ?? 0) + lost.occupancy);
        diagnostics.push({
          code: 'split-position',
          message: `${describe(structure, kept)} and ${describe(structure, lost)} are ${apart.toFixed(2)} Å apart and partly occupied; the nearer stands for both`,
        });
      } else if (kept.element === 'H' || lost.element === 'H') {
        diagnostics.push({
          code: 'hydrogen-overlap',
          message: `${describe(structure, kept)} and ${describe(structure, lost)} are ${apart.toFixed(2)} Å apart`,
        });
        continue;
      } else {
        throw new InputError(
          `${describe(structure, kept)} and ${describe(structure, lost)} are ${apart.toFixed(3)} Å apart, closer than atoms can be; ` +
            'remove one, or mark them as alternates with occupancies that sum to 1',
        );
      }
      out.add(lost);
    }
  }
  if (out.size === 0) return atoms;
  return atoms
    .filter((atom) => !out.has(atom))
    .map((atom) => (extra.has(atom) ? { ...atom, occupancy: Math.min(1, atom.occupancy + extra.get(atom)!) } : atom));
}

function describe({ atoms }: Structure, atom: SiteAtom): string {
  const { line } = atoms[atom.source]!;
  return `${atomLabel(atoms[atom.source]!)}${line === undefined ? '' : ` (line ${line})`}${atom.symmetry === 'x,y,z' ? '' : ` at ${atom.symmetry}`}`;
}

function normalised(sites: readonly Site[]): Site[] {
  const total = sites.reduce((sum, site) => sum + site.weight, 0);
  return sites.map((site) => ({ ...site, weight: site.weight / total }));
}

/** Å: distances of equivalent sites listed apart differ by the rounding of their coordinates only. */
const SAME_DISTANCE = 5e-4;

/** Sites of a crystal whose surroundings are the same, distance by distance and, around the nearest atoms, pair by pair, are one. */
function mergeEquivalent(sites: readonly Site[]): Site[] {
  interface Kept {
    readonly site: Site;
    readonly print: Float64Array;
    weight: number;
    count: number;
  }
  const kept: Kept[] = [];
  // Twins have like elements and their nearest neighbours in one bin or in neighbouring ones, so that none is met with all.
  const bins = new Map<string, Kept[]>();
  for (const site of sites) {
    const { print, elements } = fingerprint(site);
    const bin = Math.floor((site.atoms[1]?.distance ?? 0) / SAME_DISTANCE);
    const twin = [bin - 1, bin, bin + 1]
      .flatMap((near) => bins.get(`${near} ${elements}`) ?? [])
      .find((other) => mayMerge(other.site, site) && isNear(other.print, print));
    if (twin) {
      twin.weight += site.weight;
      twin.count++;
      continue;
    }
    const one: Kept = { site, weight: site.weight, count: 1, print };
    kept.push(one);
    const key = `${bin} ${elements}`;
    const own = bins.get(key);
    if (own) own.push(one);
    else bins.set(key, [one]);
  }
  return kept.map(({ site, weight, count }) =>
    count === 1
      ? site
      : {
          ...site,
          weight,
          diagnostics: [
            ...site.diagnostics,
            site.variant === undefined
              ? { code: 'equivalent-sites', message: `${site.label} stands for ${count} listed atoms with the same surroundings` }
              : {
                  code: 'equivalent-variants',
                  message: `${site.label}: ${count} ways its surroundings can be are alike by symmetry and one`,
                },
          ],
        },
  );
}

/** Atoms listed apart, or ways the surroundings of one atom can be: mirror images, of a group disordered about a symmetry element. */
const mayMerge = (a: Site, b: Site): boolean =>
  b.variant === undefined ? a.variant === undefined : a.variant !== undefined && a.label === b.label;

function fingerprint(site: Site): { print: Float64Array; elements: string } {
  const near = site.atoms.slice(1, 25);
  const pairs: number[] = [];
  for (let i = 0; i < near.length; i++) for (let j = 0; j < i; j++) pairs.push(distance(near[i]!.position, near[j]!.position));
  // Sorted within each element, so that ties between elements cannot change the order.
  const byElement = [...site.atoms].sort((a, b) => (a.element < b.element ? -1 : a.element > b.element ? 1 : a.distance - b.distance));
  return {
    print: Float64Array.from([
      ...byElement.map((atom) => atom.distance),
      ...byElement.map((atom) => atom.occupancy),
      ...pairs.sort((a, b) => a - b),
    ]),
    elements: byElement.map((atom) => atom.element).join(''),
  };
}

const isNear = (a: Float64Array, b: Float64Array): boolean =>
  a.length === b.length && a.every((value, i) => Math.abs(value - b[i]!) < SAME_DISTANCE);
