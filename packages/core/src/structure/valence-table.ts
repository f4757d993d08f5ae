/**
 * Bond-valence parameters: s = exp((R0 − R)/b), one published value for each pair, taken in this order of trust: fitted to
 * crystals (Brown & Altermatt), fitted to transition-metal complexes (Liu & Thorp; Shields et al.), extrapolated (Brese & O'Keeffe).
 * Values marked "from memory" were not looked up in their paper.
 */
export const VALENCE_SOURCES = {
  brown1985: 'Brown & Altermatt, Acta Cryst. B41, 244 (1985)',
  brese1991: "Brese & O'Keeffe, Acta Cryst. B47, 192 (1991)",
  liu1993: 'Liu & Thorp, Inorg. Chem. 32, 4102 (1993)',
  shields2000: 'Shields, Raithby, Allen & Motherwell, Acta Cryst. B56, 455 (2000)',
  chen2002: 'Chen, Zhou & Hu, Chin. Sci. Bull. 47, 978 (2002)',
  brownPrivate: 'I. D. Brown, private communication in his accumulated table (2013)',
} as const;

export type ValenceRow = readonly [
  cation: string,
  oxidationState: number,
  anion: string,
  r0: number,
  b: number,
  source: keyof typeof VALENCE_SOURCES,
];

// biome-ignore format: one pair a line
export const VALENCE_ROWS: readonly ValenceRow[] = [
  ['Ca', 2, 'Cl', 2.37, 0.37, 'brese1991'],
  ['Ca', 2, 'N', 2.14, 0.37, 'brese1991'],
  ['Ca', 2, 'O', 1.967, 0.37, 'brown1985'],
  ['Ca', 2, 'S', 2.45, 0.37, 'brese1991'],
  ['Cu', 1, 'Cl', 1.858, 0.37, 'shields2000'],
  ['Cu', 1, 'N', 1.52, 0.37, 'shields2000'],
  ['Cu', 1, 'O', 1.61, 0.37, 'brownPrivate'],
  ['Cu', 1, 'S', 1.898, 0.37, 'brown1985'],
  ['Cu', 2, 'Cl', 2, 0.37, 'brese1991'],
  ['Cu', 2, 'N', 1.751, 0.37, 'liu1993'],
  ['Cu', 2, 'O', 1.679, 0.37, 'brown1985'],
  ['Cu', 2, 'S', 2.054, 0.37, 'brown1985'],
  ['Fe', 2, 'Cl', 2.06, 0.37, 'brese1991'],
  ['Fe', 2, 'N', 1.769, 0.37, 'liu1993'],
  ['Fe', 2, 'O', 1.734, 0.37, 'brown1985'],
  ['Fe', 2, 'S', 2.125, 0.37, 'liu1993'],
  ['Fe', 3, 'Cl', 2.09, 0.37, 'brese1991'],
  ['Fe', 3, 'N', 1.815, 0.37, 'liu1993'],
  ['Fe', 3, 'O', 1.759, 0.37, 'brown1985'],
  ['Fe', 3, 'S', 2.149, 0.37, 'brown1985'],
  ['Mn', 2, 'Cl', 2.133, 0.37, 'brown1985'],
  ['Mn', 2, 'N', 1.849, 0.37, 'liu1993'],
  ['Mn', 2, 'O', 1.79, 0.37, 'brown1985'],
  ['Mn', 2, 'S', 2.22, 0.37, 'brownPrivate'],
  ['Mn', 3, 'Cl', 2.14, 0.37, 'brese1991'],
  ['Mn', 3, 'N', 1.837, 0.37, 'liu1993'],
  ['Mn', 3, 'O', 1.76, 0.37, 'brown1985'],
  ['Mn', 4, 'Cl', 2.13, 0.37, 'brese1991'],
  ['Mn', 4, 'N', 1.822, 0.37, 'liu1993'],
  ['Mn', 4, 'O', 1.753, 0.37, 'brown1985'],
  ['Mo', 4, 'N', 2.043, 0.37, 'liu1993'],
  ['Mo', 4, 'O', 1.886, 0.37, 'liu1993'],
  ['Mo', 4, 'S', 2.235, 0.37, 'liu1993'],
  ['Mo', 5, 'Cl', 2.26, 0.37, 'brownPrivate'],
  ['Mo', 5, 'N', 2.009, 0.37, 'liu1993'],
  ['Mo', 5, 'O', 1.907, 0.37, 'liu1993'],
  ['Mo', 5, 'S', 2.288, 0.37, 'liu1993'],
  ['Mo', 6, 'Cl', 2.28, 0.37, 'brese1991'],
  ['Mo', 6, 'N', 2.009, 0.37, 'liu1993'],
  ['Mo', 6, 'O', 1.907, 0.37, 'brown1985'],
  ['Mo', 6, 'S', 2.331, 0.37, 'liu1993'],
  ['Ni', 2, 'Cl', 2.02, 0.37, 'brese1991'],
  ['Ni', 2, 'N', 1.647, 0.37, 'liu1993'],
  ['Ni', 2, 'O', 1.654, 0.37, 'brown1985'],
  ['Ni', 2, 'S', 1.937, 0.37, 'liu1993'],
  ['Si', 4, 'Cl', 2.03, 0.37, 'brese1991'],
  ['Si', 4, 'N', 1.724, 0.37, 'brown1985'],
  ['Si', 4, 'O', 1.64, 0.37, 'brown1985'],
  ['Si', 4, 'S', 2.126, 0.37, 'brown1985'],
  ['Ti', 4, 'Cl', 2.19, 0.37, 'brese1991'],
  ['Ti', 4, 'O', 1.815, 0.37, 'brown1985'],
  ['Ti', 4, 'S', 2.29, 0.37, 'brownPrivate'],
  ['V', 4, 'Cl', 2.16, 0.37, 'brese1991'],
  ['V', 4, 'N', 1.875, 0.37, 'liu1993'],
  ['V', 4, 'O', 1.784, 0.37, 'brown1985'],
  ['V', 4, 'S', 2.226, 0.37, 'liu1993'],
  ['V', 5, 'Cl', 2.16, 0.37, 'brese1991'],
  ['V', 5, 'O', 1.803, 0.37, 'brown1985'],
  ['V', 5, 'S', 2.25, 0.37, 'brownPrivate'],
  ['Zn', 2, 'Cl', 2.01, 0.37, 'brese1991'],
  ['Zn', 2, 'N', 1.77, 0.37, 'brese1991'],
  ['Zn', 2, 'O', 1.704, 0.37, 'brown1985'],
  ['Zn', 2, 'S', 2.09, 0.37, 'brese1991'],
  ['Co', 2, 'O', 1.692, 0.37, 'brown1985'], // from memory
  ['Co', 3, 'O', 1.7, 0.37, 'brown1985'], // from memory
  ['Co', 2, 'N', 1.84, 0.37, 'brese1991'], // from memory
  ['Co', 2, 'S', 2.06, 0.37, 'brese1991'], // from memory
  ['Co', 2, 'Cl', 2.01, 0.37, 'brese1991'], // from memory
  ['Cr', 3, 'O', 1.724, 0.37, 'brown1985'], // from memory
  ['Cr', 6, 'O', 1.794, 0.37, 'brown1985'], // from memory
  ['Mg', 2, 'O', 1.693, 0.37, 'brown1985'], // from memory
];
