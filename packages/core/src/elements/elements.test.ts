import { expect, test } from 'vitest';
import { InputError } from '../errors.js';
import { coreWidthEv, covalentRadius, edgeEnergyEv, elementByNumber, elementBySymbol, elementSymbol, hasEdge } from './index.js';

test('symbols of any case, numbers, masses', () => {
  expect(elementBySymbol('FE')).toMatchObject({ Z: 26, symbol: 'Fe' });
  expect(elementByNumber(92).symbol).toBe('U');
  expect(elementByNumber(103).symbol).toBe('Lr');
  expect(elementSymbol('d')).toBe('H');
  expect(elementSymbol('Xq')).toBeUndefined();
  // IUPAC 2016: Zn 65.38, Au 196.966569 (Pure Appl. Chem. 88, 265).
  expect(elementBySymbol('Zn').mass).toBe(65.38);
  expect(elementBySymbol('Au').mass).toBe(196.966569);
  for (const bad of ['', 'Fx', 'F e']) expect(() => elementBySymbol(bad)).toThrow(InputError);
  for (const bad of [0, 104, 1.5, Number.NaN]) expect(() => elementByNumber(bad)).toThrow(InputError);
});

// Bearden & Burr, Rev. Mod. Phys. 39, 125 (1967), from memory; K edges agree to the digit, L edges of the other table within 2.5 eV.
test.each([
  [13, 'K', 1559.6, 0.05],
  [23, 'K', 5465.1, 0.05],
  [27, 'K', 7708.9, 0.05],
  [29, 'K', 8978.9, 0.05],
  [42, 'K', 19999.5, 0.05],
  [29, 'L3', 931.1, 2],
  [78, 'L3', 11563.7, 2.5],
  [79, 'L3', 11918.7, 2.5],
  [92, 'L3', 17166.3, 4],
] as const)('edge of Z = %i, %s', (Z, edge, energy, tolerance) => {
  expect(Math.abs(edgeEnergyEv(Z, edge) - energy)).toBeLessThanOrEqual(tolerance);
});

test('edges rise with Z as Moseley has it, and K > L1 > L2 ≥ L3 of every element', () => {
  for (let Z = 11; Z <= 92; Z++) {
    const [k, l1, l2, l3] = (['K', 'L1', 'L2', 'L3'] as const).map((edge) => edgeEnergyEv(Z, edge));
    expect(k).toBeGreaterThan(l1!);
    expect(l1).toBeGreaterThan(l2!);
    expect(l2).toBeGreaterThanOrEqual(l3!);
    for (const edge of ['K', 'L1', 'L2', 'L3'] as const) expect(coreWidthEv(Z, edge)).toBeGreaterThan(0);
    // √E is linear in Z but for screening: the second difference of one misplaced row would be far larger than this.
    if (Z > 12 && Z < 92) {
      const root = (z: number) => Math.sqrt(edgeEnergyEv(z, 'K'));
      expect(Math.abs(root(Z + 1) - 2 * root(Z) + root(Z - 1))).toBeLessThan(0.12);
    }
  }
});

test('widths: Cu K 1.49 eV, Au L3 5.41 eV (Campbell & Papp 2001, from memory, ± 10 %)', () => {
  expect(Math.abs(coreWidthEv(29, 'K') / 1.49 - 1)).toBeLessThan(0.1);
  expect(Math.abs(coreWidthEv(79, 'L3') / 5.41 - 1)).toBeLessThan(0.1);
});

test('an element too light for the edge is one clear line', () => {
  expect(() => edgeEnergyEv(8, 'K')).toThrow('O is too light for a K edge; Na (11) to U (92) can be absorbers');
  expect(() => coreWidthEv(94, 'L3')).toThrow(/Pu lies beyond the table/);
  expect(hasEdge(10)).toBe(false);
  expect(hasEdge(11)).toBe(true);
});

test('covalent radii (Cordero et al. 2008, from memory): C 0.76, Zn 1.22, Au 1.36 Å', () => {
  expect([covalentRadius('C'), covalentRadius('Zn'), covalentRadius('Au')]).toEqual([0.76, 1.22, 1.36]);
  expect(() => covalentRadius('Lr')).toThrow(InputError);
});
