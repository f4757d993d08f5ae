// Cost of disorder: correlated Debye a path, the spring network by size. `npx vitest bench --run disorder`.
import { afterAll, bench, describe } from 'vitest';
import { correlatedDebye, springNetwork, type ThermalVertex } from '../../packages/core/src/disorder/index.js';
import { seededRandom } from '../support/random.js';
import { atomAt, crystals, routeTo, shellsOf } from '../support/spring-bodies.js';

const random = seededRandom(1);
const place = () => [0, 0, 0].map(() => 12 * (random() - 0.5)) as unknown as readonly [number, number, number];
const routes = Array.from({ length: 1000 }, (_, n) =>
  Array.from(
    { length: 2 + (n % 3) },
    (_, atom): ThermalVertex => ({ atom, element: 'Fe', mass: 55.8, position: atom ? place() : [0, 0, 0] }),
  ),
);
let sink = 0; // a result nobody looks at may be optimised away
afterAll(() => {
  if (!(sink > 0)) throw new Error(`σ² added up to ${sink}`);
});

describe('correlated Debye, 1000 routes of 2–4 legs', () => {
  bench('distances never met before', () => {
    const model = correlatedDebye({ debyeTemperature: 400, atomDensity: 0.08, temperature: 300 });
    for (const route of routes) sink += model.sigma2(route);
  });
  const warm = correlatedDebye({ debyeTemperature: 400, atomDensity: 0.08, temperature: 300 });
  bench('distances met before', () => {
    for (const route of routes) sink += warm.sigma2(route);
  });
});

describe('spring network, irregular clusters, 100 first- and second-neighbour routes', () => {
  for (const count of [50, 150, 400]) {
    const atoms = Array.from({ length: count }, (_, n) => {
      const [i, j, k] = [n % 7, Math.floor(n / 7) % 7, Math.floor(n / 49)];
      return atomAt(
        (i + j + k) % 2 ? 'S' : 'Fe',
        [i, j, k].map((x) => 2.3 * x + 0.2 * random()),
      );
    });
    const route = (n: number) => [0, 1 + (n % 49)].map((atom): ThermalVertex => ({ atom, ...atoms[atom]! }));
    bench(
      `${count} atoms`,
      () => {
        const model = springNetwork({ atoms }, { temperature: 300 });
        for (let n = 0; n < 100; n++) sink += model.sigma2(route(n));
      },
      { iterations: 2, warmupIterations: 1, time: 500 },
    );
  }
});

describe('spring network, crystals, all shells to 5.5 Å', () => {
  for (const [name, body] of [
    ['copper, 1 atom', crystals.fcc('Cu', 3.6149)],
    ['chromia, 10 atoms', crystals.corundum('Cr', 4.9607, 13.599, 0.3475, 0.3058)],
  ] as const) {
    const shells = shellsOf(body, 5.5).map((s) => routeTo(body, s.element, s.position));
    bench(
      name,
      () => {
        const model = springNetwork(body, { temperature: 300 });
        for (const route of shells) sink += model.sigma2(route);
      },
      { iterations: 5, time: 500 },
    );
  }
});
