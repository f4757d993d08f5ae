/** What `ringtrue sites` prints: the structure, its absorbing sites with their neighbours, and what they say of the valence. */
import type { Diagnostic } from '../errors.js';
import { coordinationShell } from './bonding.js';
import { coordinatePrecision, distanceSd } from './precision.js';
import { atomLabel, findSites } from './sites.js';
import type { Cell, Site, Structure, StructureFormat } from './types.js';
import { bondValenceSums, type ValenceSum } from './valence.js';

export interface DescribeOptions {
  readonly file?: string;
  /** As SiteOptions.absorber. */
  readonly absorber?: string;
  /** Neighbours listed to this distance, Å. Default 4. */
  readonly radius?: number;
}

export interface DescribedNeighbour {
  readonly label: string;
  readonly element: string;
  /** Å */
  readonly distance: number;
  /** Standard uncertainty of the distance, Å. */
  readonly sd: number;
  readonly occupancy: number;
  /** Operation that makes it from the atom of the file; "x,y,z" for that atom itself. */
  readonly symmetry: string;
  readonly bonded: boolean;
}

export interface DescribedSite {
  readonly label: string;
  readonly element: string;
  readonly weight: number;
  /** Alternate conformations; one without a name where there is a single one. `weight` is the part of the site. */
  readonly variants: readonly { readonly name: string; readonly weight: number; readonly neighbours: readonly DescribedNeighbour[] }[];
  /** Of the likeliest variant. */
  readonly neighbours: readonly DescribedNeighbour[];
  readonly coordination: number;
  /** Of the likeliest variant, by oxidation state. */
  readonly valence: readonly ValenceSum[];
}

export interface SitesDescription {
  readonly structure: {
    readonly file: string;
    readonly format: StructureFormat;
    readonly atoms: number;
    readonly frames: number;
    readonly cell: Cell | null;
    readonly spaceGroup: string | null;
    readonly title: string;
    /** σ(x) of an average atom, Å, and where it comes from. */
    readonly precision: { readonly sigma: number; readonly method: string; readonly origin: string };
  };
  readonly sites: readonly DescribedSite[];
  readonly warnings: readonly Diagnostic[];
}

/**
 * The absorbing sites of a structure in plain data, as in the JSON of `ringtrue sites`.
 * @throws {InputError} as findSites
 */
export function describeSites(structure: Structure, { file = '', absorber, radius = 4 }: DescribeOptions = {}): SitesDescription {
  const sites = findSites(structure, { radius, ...(absorber === undefined ? {} : { absorber }) });
  const precision = coordinatePrecision(structure);
  const neighboursOf = (site: Site): DescribedNeighbour[] => {
    const shell = new Set(coordinationShell(site, structure.links));
    return site.atoms.slice(1).map((atom) => ({
      label: atomLabel(structure.atoms[atom.source]!),
      element: atom.element,
      distance: atom.distance,
      sd: distanceSd(precision, site.atoms[0]!, atom),
      occupancy: atom.occupancy,
      symmetry: atom.symmetry,
      bonded: shell.has(atom),
    }));
  };
  const bySource = new Map<number, Site[]>();
  for (const site of sites) {
    const own = bySource.get(site.atoms[0]!.source);
    if (own) own.push(site);
    else bySource.set(site.atoms[0]!.source, [site]);
  }
  const described = [...bySource.values()].map((variants): DescribedSite => {
    const [first] = variants as [Site, ...Site[]];
    const weight = variants.reduce((sum, variant) => sum + variant.weight, 0);
    const listed = variants.map(neighboursOf);
    const neighbours = listed[0]!;
    const bonds = neighbours.filter(({ bonded }) => bonded);
    return {
      label: first.label,
      element: first.element,
      weight,
      variants: variants.map((variant, i) => ({
        name: variant.variant ?? '',
        weight: variant.weight / weight,
        neighbours: listed[i]!,
      })),
      neighbours,
      coordination: bonds.reduce((sum, { occupancy }) => sum + occupancy, 0),
      valence: bondValenceSums(
        first.element,
        bonds.map(({ element, distance, sd, occupancy }) => ({ element, distance, distanceSd: sd, occupancy })),
      ),
    };
  });
  const { method, sigma, origin } = precision;
  return {
    structure: {
      file,
      format: structure.format,
      atoms: structure.atoms.length,
      frames: structure.moreFrames.length + 1,
      cell: structure.cell ?? null,
      spaceGroup: structure.spaceGroup ?? null,
      title: structure.title,
      precision: { sigma, method, origin },
    },
    sites: described,
    warnings: uniqueDiagnostics([...structure.diagnostics, ...sites.flatMap((site) => site.diagnostics)]),
  };
}

/** Each message once, in order. */
function uniqueDiagnostics(diagnostics: readonly Diagnostic[]): Diagnostic[] {
  return [...new Map(diagnostics.map((diagnostic) => [diagnostic.message, diagnostic])).values()];
}
