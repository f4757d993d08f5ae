import { expect, test } from 'vitest';
import { expectNear } from '../../../../test/support/expect-near.js';
import { seededRandom } from '../../../../test/support/random.js';
import { InputError } from '../errors.js';
import { cellGeometry, cellOfVectors, transform } from './cell.js';
import type { Vec3 } from './types.js';

const radians = (degrees: number) => (degrees * Math.PI) / 180;

test('triclinic cells: the vectors have the lengths and angles they were made of, V and |a*| the textbook values', () => {
  const random = seededRandom(5);
  for (let run = 0; run < 50; run++) {
    const [a, b, c] = [0, 1, 2].map(() => 3 + 20 * random()) as [number, number, number];
    const [alpha, beta, gamma] = [0, 1, 2].map(() => 75 + 40 * random()) as [number, number, number];
    const geometry = cellGeometry({ a, b, c, alpha, beta, gamma });
    const vectors = [0, 1, 2].map((i) => transform(geometry.toCartesian, [Number(i === 0), Number(i === 1), Number(i === 2)])) as [
      Vec3,
      Vec3,
      Vec3,
    ];
    const back = cellOfVectors(...vectors);
    for (const [key, wanted] of Object.entries({ a, b, c, alpha, beta, gamma })) {
      expectNear(back[key as 'a'], wanted, { rel: 1e-12, label: key });
    }
    // International Tables C, 1.1.1: V and a* = b c sin α / V.
    const [ca, cb, cg] = [alpha, beta, gamma].map((angle) => Math.cos(radians(angle))) as [number, number, number];
    const volume = a * b * c * Math.sqrt(1 - ca * ca - cb * cb - cg * cg + 2 * ca * cb * cg);
    expectNear(geometry.volume, volume, { rel: 1e-11, label: 'V' });
    expectNear(geometry.reciprocal[0], (b * c * Math.sin(radians(alpha))) / volume, { rel: 1e-11, label: 'a*' });
    const f: Vec3 = [random(), random(), random()];
    transform(geometry.toFractional, transform(geometry.toCartesian, f)).forEach((v, i) => {
      expectNear(v, f[i]!, { abs: 1e-13, label: `f${i}` });
    });
  }
});

test.each([
  [{ a: 0, b: 1, c: 1, alpha: 90, beta: 90, gamma: 90 }, /length a is 0/],
  [{ a: 5, b: Number.NaN, c: 1, alpha: 90, beta: 90, gamma: 90 }, /length b is NaN/],
  [{ a: 5, b: 5, c: 5, alpha: 90, beta: 180, gamma: 90 }, /angle beta is 180/],
  [{ a: 5, b: 5, c: 5, alpha: 60, beta: 60, gamma: 120 }, /no volume/],
  [{ a: 5, b: 5, c: 5, alpha: 30, beta: 30, gamma: 120 }, /no volume/],
])('%j is refused', (cell, message) => {
  expect(() => cellGeometry(cell)).toThrow(InputError);
  expect(() => cellGeometry(cell)).toThrow(message);
});
