/** A self-consistent free atom on its logarithmic mesh. Hartree atomic units throughout. */
export interface FreeAtom {
  readonly Z: number;
  /** Mesh radii r_i = exp(x0 + i dx), bohr (n). */
  readonly r: Float64Array;
  readonly x0: number;
  readonly dx: number;
  /** 4π r² ρ(r), electrons per bohr (n). */
  readonly radialDensity: Float64Array;
  /** r·V_coulomb(r), V_coulomb = −Z/r + V_Hartree, no exchange-correlation, hartree·bohr (n); tends to 0 for a neutral atom. */
  readonly rCoulomb: Float64Array;
  /** Kohn–Sham levels, hartree; `label` "2p" (non-relativistic) or "2p1/2", "2p3/2" (Dirac). */
  readonly levels: readonly {
    readonly label: string;
    readonly n: number;
    readonly l: number;
    readonly kappa?: number;
    readonly occupation: number;
    readonly energy: number;
  }[];
  /** Total energy, hartree. */
  readonly total: number;
  readonly iterations: number;
}

/** Removed core electron: 'K' 1s, 'L1' 2s, 'L2' 2p1/2, 'L3' 2p3/2. */
export type Edge = 'K' | 'L1' | 'L2' | 'L3';

export interface AtomOptions {
  readonly Z: number;
  /** Default 'dirac'. */
  readonly relativity?: 'none' | 'dirac';
  /** Default 'barth-hedin'. 'vwn' with relativity 'dirac' takes the MacDonald–Vosko exchange factor, as the published tables do. */
  readonly exchangeCorrelation?: 'barth-hedin' | 'vwn';
  /** Absorber with this core hole, its valence filled as in element Z + 1 (final-state rule). Default none. */
  readonly coreHole?: Edge;
  /** Speed of light, default CODATA 2022; published tables used the value of their year. */
  readonly speedOfLight?: number;
}
