/**
 * Stretching wavenumbers by kind of bond, cm⁻¹. From memory of the ranges in Nakamoto, Infrared and Raman Spectra of
 * Inorganic and Coordination Compounds (Wiley), and of the organic group frequencies every textbook lists; nothing was
 * looked up. One number stands for a range: σ² at low temperature goes as 1/ν, so half the range is the error to expect.
 *
 * Kinds that elements cannot tell apart are told by the bond's length, as its excess over the sum of single-bond radii
 * (spring-parameters.ts); the first line that fits is taken.
 */
export interface BondFrequency {
  readonly kind: string;
  /** Elements, or "metal". */
  readonly between: readonly [string, string];
  /** Longest excess over r₁ + r₁, Å. */
  readonly upTo: number;
  readonly wavenumber: number;
  readonly range: readonly [number, number];
}

const any = Number.POSITIVE_INFINITY;

export const BOND_FREQUENCIES: readonly BondFrequency[] = [
  { kind: 'metal–oxo', between: ['metal', 'O'], upTo: -0.08, wavenumber: 880, range: [780, 1000] },
  { kind: 'metal–bridging oxide or hydroxo', between: ['metal', 'O'], upTo: 0.14, wavenumber: 560, range: [450, 700] },
  { kind: 'metal–carboxylate, alkoxide or phenolate', between: ['metal', 'O'], upTo: 0.26, wavenumber: 430, range: [330, 550] },
  { kind: 'metal–water', between: ['metal', 'O'], upTo: any, wavenumber: 370, range: [300, 490] },
  { kind: 'metal–nitrido or nitrosyl', between: ['metal', 'N'], upTo: -0.1, wavenumber: 800, range: [550, 1050] },
  { kind: 'metal–ammine, imidazole or porphyrin', between: ['metal', 'N'], upTo: any, wavenumber: 350, range: [220, 480] },
  { kind: 'metal–cyanide or carbonyl carbon', between: ['metal', 'C'], upTo: any, wavenumber: 430, range: [360, 560] },
  { kind: 'metal–sulfido', between: ['metal', 'S'], upTo: -0.06, wavenumber: 480, range: [430, 530] },
  { kind: 'metal–thiolate or bridging sulfide', between: ['metal', 'S'], upTo: any, wavenumber: 330, range: [270, 400] },
  { kind: 'metal–selenium', between: ['metal', 'Se'], upTo: any, wavenumber: 240, range: [200, 300] },
  { kind: 'metal–phosphine', between: ['metal', 'P'], upTo: any, wavenumber: 240, range: [180, 400] },
  { kind: 'metal–fluoride', between: ['metal', 'F'], upTo: any, wavenumber: 520, range: [400, 750] },
  { kind: 'metal–chloride', between: ['metal', 'Cl'], upTo: any, wavenumber: 310, range: [200, 400] },
  { kind: 'metal–bromide', between: ['metal', 'Br'], upTo: any, wavenumber: 220, range: [150, 290] },
  { kind: 'metal–iodide', between: ['metal', 'I'], upTo: any, wavenumber: 170, range: [120, 220] },
  { kind: 'C≡N', between: ['C', 'N'], upTo: -0.25, wavenumber: 2120, range: [2040, 2260] },
  { kind: 'C=N or aromatic C–N', between: ['C', 'N'], upTo: -0.08, wavenumber: 1450, range: [1300, 1690] },
  { kind: 'C–N', between: ['C', 'N'], upTo: any, wavenumber: 1080, range: [1000, 1250] },
  { kind: 'C≡O', between: ['C', 'O'], upTo: -0.2, wavenumber: 2000, range: [1850, 2140] },
  { kind: 'C=O or carboxylate', between: ['C', 'O'], upTo: -0.08, wavenumber: 1550, range: [1400, 1750] },
  { kind: 'C–O', between: ['C', 'O'], upTo: any, wavenumber: 1080, range: [1000, 1260] },
  { kind: 'C=C or aromatic', between: ['C', 'C'], upTo: -0.06, wavenumber: 1500, range: [1400, 1680] },
  { kind: 'C–C', between: ['C', 'C'], upTo: any, wavenumber: 950, range: [800, 1200] },
  { kind: 'C–S', between: ['C', 'S'], upTo: any, wavenumber: 680, range: [600, 750] },
  { kind: 'S–O', between: ['S', 'O'], upTo: any, wavenumber: 1050, range: [970, 1200] },
  { kind: 'P–O', between: ['P', 'O'], upTo: any, wavenumber: 1000, range: [900, 1150] },
  { kind: 'S–S', between: ['S', 'S'], upTo: any, wavenumber: 500, range: [430, 550] },
];
