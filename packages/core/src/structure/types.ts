/**
 * What a coordinate file becomes: Structure (the file, as written) and Site (one absorber and its surroundings).
 * Units: Å, Å², degrees. Positions are Cartesian unless the name says fractional.
 */
import type { Diagnostic } from '../errors.js';

export type Vec3 = readonly [x: number, y: number, z: number];

export type StructureFormat = 'xyz' | 'pdb' | 'mmcif' | 'cif';

export interface Cell {
  readonly a: number;
  readonly b: number;
  readonly c: number;
  /** Degrees. */
  readonly alpha: number;
  readonly beta: number;
  readonly gamma: number;
  /** Cell vectors in the file's axes, Å, where these are not the standard ones (a along x, b in the xy plane). */
  readonly vectors?: readonly [a: Vec3, b: Vec3, c: Vec3];
}

/** x' = rotation · x + translation in fractional coordinates; rotation row-major (9). */
export interface SymmetryOperator {
  readonly rotation: readonly number[];
  readonly translation: Vec3;
  /** As written, e.g. "-x, y+1/2, -z". */
  readonly text: string;
}

/** Residue of a macromolecular file. */
export interface Residue {
  readonly name: string;
  readonly number: number;
  readonly insertion: string;
  readonly chain: string;
}

export interface Atom {
  /** Name as written in the file ("CA", "Fe1"), or element + running number. */
  readonly name: string;
  /** Element symbol, "Fe"; deuterium is "H". */
  readonly element: string;
  /** Cartesian, Å. */
  readonly position: Vec3;
  /** 0 … 1. */
  readonly occupancy: number;
  /** Isotropic U, Å² (B = 8π²U). */
  readonly uIso?: number;
  /** Standard uncertainty of the Cartesian position per axis, Å, where the file states one. */
  readonly positionSu?: Vec3;
  /** Alternate conformation or disorder-group label; absent when there is one position only. */
  readonly alternate?: string;
  /** Disorder assembly of a CIF; alternates of different assemblies are chosen independently. */
  readonly assembly?: string;
  readonly residue?: Residue;
  readonly formalCharge?: number;
  /** Line of the file the atom came from, from 1. */
  readonly line?: number;
}

/** A bond that the file states. */
export interface Link {
  /** Indices into Structure.atoms. */
  readonly sources: readonly [number, number];
  /** Å; tells which image of the other atom is meant when the bond goes to a symmetry copy. */
  readonly length: number;
}

/** What a file states about how well its coordinates are known. */
export interface RefinementStatistics {
  /** High-resolution limit, Å. */
  readonly resolution?: number;
  readonly rWork?: number;
  readonly rFree?: number;
  /** Fraction 0 … 1. */
  readonly completeness?: number;
  readonly reflections?: number;
  readonly method?: string;
}

export interface Structure {
  readonly format: StructureFormat;
  readonly title: string;
  /** First frame or model. */
  readonly atoms: readonly Atom[];
  /** Further frames (xyz) or models (pdb, mmcif), in file order; empty for one frame. */
  readonly moreFrames: readonly (readonly Atom[])[];
  readonly cell?: Cell;
  /** Which cell vectors repeat; absent: all three where there is a cell (a slab in extended XYZ repeats in two). */
  readonly repeats?: readonly [boolean, boolean, boolean];
  /** Fractional operators, identity first; only the identity where there is no crystal. */
  readonly operators: readonly SymmetryOperator[];
  readonly spaceGroup?: string;
  readonly statistics?: RefinementStatistics;
  /** Bonds the file states (LINK and CONECT of a PDB); absent where it states none. */
  readonly links?: readonly Link[];
  readonly diagnostics: readonly Diagnostic[];
}

/** One atom of a site's cluster: an atom of the file under one symmetry operation. */
export interface SiteAtom {
  readonly element: string;
  readonly name: string;
  /** Cartesian, Å, in the file's axes. */
  readonly position: Vec3;
  /** Distance to the absorber, Å. */
  readonly distance: number;
  readonly occupancy: number;
  /** Index into Structure.atoms. */
  readonly source: number;
  /** Symmetry operation and lattice translation that made it; "x,y,z" for the atom itself. */
  readonly symmetry: string;
  readonly uIso?: number;
  readonly residue?: Residue;
}

/**
 * An absorber and the atoms around it: atoms[0] is the absorber, the others follow by distance, ties by source
 * and symmetry, so the same site always lists alike.
 */
export interface Site {
  readonly label: string;
  readonly element: string;
  /** Part of the measured average, all sites of one absorber element summing to 1. */
  readonly weight: number;
  readonly atoms: readonly SiteAtom[];
  /** Å: the cluster is complete to here (Infinity for a molecule that lies wholly inside). */
  readonly radius: number;
  /** Which alternate conformations this cluster is made of ("A", "A+B"); absent when there is one only. */
  readonly variant?: string;
  /** True when the cluster was cut from a crystal. */
  readonly periodic: boolean;
  /** Atoms per Å³ of the crystal, hydrogens left out; absent without a crystal. */
  readonly atomDensity?: number;
  readonly diagnostics: readonly Diagnostic[];
}
