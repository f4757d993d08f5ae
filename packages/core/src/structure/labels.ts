/** From what files call an atom to its element. Undefined means unknown; nothing is ever turned into another element. */
import { elementByNumber, elementSymbol } from '../elements/index.js';

/** The element and charge of a type symbol, "Mg2+", "O1-", "FE", "Cl"; deuterium is H. */
export function elementOfType(text: string): { element: string; charge?: number } | undefined {
  const [, letters = '', rest = ''] = /^([A-Za-z]{1,2})(.*)$/.exec(text.trim()) ?? [];
  const element = elementSymbol(letters);
  if (!element) return undefined;
  const charge = chargeOf(rest);
  return charge === undefined ? { element } : { element, charge };
}

/** "2+", "+2", "1-", "+" → signed integer; undefined when it is none. */
export function chargeOf(text: string): number | undefined {
  const [, before, sign, after] = /^\s*(\d?)([+-])(\d?)\s*$/.exec(text) ?? [];
  if (!sign) return undefined;
  return (sign === '-' ? -1 : 1) * Number(before || after || '1');
}

/**
 * The element of an atom label, "Fe1", "FE1", "O1A", "OW3", or of an atomic number, "26". Two letters are taken together if they
 * are an element (and, where `among` is known from a formula, one of it), else the first alone.
 */
export function elementOfLabel(label: string, among?: ReadonlySet<string>): string | undefined {
  if (/^\d+$/.test(label)) {
    const Z = Number(label);
    return Z >= 1 && Z <= 103 ? elementByNumber(Z).symbol : undefined;
  }
  const [, letters = ''] = /^([A-Za-z]+)/.exec(label) ?? [];
  const two = letters.length >= 2 ? elementSymbol(letters.slice(0, 2)) : undefined;
  const one = elementSymbol(letters.slice(0, 1));
  if (among) {
    if (two && among.has(two)) return two;
    if (one && among.has(one)) return one;
  }
  return two ?? one;
}

const STANDARD_RESIDUES = new Set(
  ('ALA ARG ASN ASP CYS GLN GLU GLY HIS ILE LEU LYS MET PHE PRO SER THR TRP TYR VAL MSE ' + 'A C G U T DA DC DG DT DU HOH WAT DOD').split(
    ' ',
  ),
);

/**
 * The element of a PDB atom whose element column is blank. Columns 13–14 hold the symbol right-justified: " CA " is a carbon,
 * "CA  " calcium. In standard residues only one-letter elements (and Se) occur, so sloppily left-justified names there are not metals.
 * @param name  columns 13–16, four characters
 */
export function elementOfPdbName(name: string, residue: string): string | undefined {
  const trimmed = name.trim().toUpperCase();
  if (trimmed === residue && elementSymbol(trimmed)) return elementSymbol(trimmed); // an ion: atom and residue share the name
  const head = name.slice(0, 2).toUpperCase();
  if (/^[\d ]/.test(head)) {
    const letter = /[A-Z]/.exec(name.toUpperCase())?.[0];
    return letter && elementSymbol(letter);
  }
  if (STANDARD_RESIDUES.has(residue)) return residue === 'MSE' && head === 'SE' ? 'Se' : elementSymbol(head.charAt(0));
  // "HG11", "HE21": a four-letter name beginning with H is a hydrogen whose name had no room for the leading blank.
  if (head.startsWith('H') && trimmed.length === 4) return 'H';
  return elementSymbol(head) ?? elementSymbol(head.charAt(0));
}
