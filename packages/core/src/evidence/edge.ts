/** Where the edge of a scan lies, and over which ranges the curves under it are fitted. */

import type { Edge } from '../atom/types.js';
import { edgeEnergyEv, elementBySymbol } from '../elements/index.js';
import { InputError } from '../errors.js';
import { steepestRise } from './normalise.js';
import type { Choice, ReduceOptions } from './reduction.js';
import type { AbsorptionScan } from './types.js';

/** eV: wider than this no edge can be placed to the few tenths of an eV that distances ask for. */
const WIDEST_AT_EDGE_EV = 10;
/** eV: over a shorter post-edge a parabola, carried back to the edge, errs by more than the straight line it replaces (3 against 1.4 %). */
const SHORT_POST_EDGE = 500;
/** eV about the tabulated edge where the rise is looked for: scales are off by up to 10 eV, oxidation moves an edge up by 20. */
const EDGE_SEARCH = [-25, 35] as const;

/**
 * Edge energy of a scan: given, or the steepest rise, which has to lie near the tabulated edge of the declared element.
 *
 * @throws {InputError} the strongest rise is elsewhere
 */
export function findEdge(scan: AbsorptionScan, element: string | undefined, edge: Edge, choices: Choice[] = []): number {
  const e0 = steepest(scan, element, edge, choices);
  const { energyEv, lines } = scan;
  const gap = energyEv.findIndex((b, i) => {
    const a = energyEv[i - 1] ?? b;
    return b - a > WIDEST_AT_EDGE_EV && a < e0 + 5 && b > e0 - 5;
  });
  if (gap > 0) {
    const place = `${energyEv[gap - 1]!.toFixed(1)} to ${energyEv[gap]!.toFixed(1)} eV (line ${lines[gap]})`;
    throw new InputError(
      `the steepest rise falls into a gap of the scan, ${place}; at the edge points may lie ${WIDEST_AT_EDGE_EV} eV apart at most`,
    );
  }
  return e0;
}

function steepest(scan: AbsorptionScan, element: string | undefined, edge: Edge, choices: Choice[]): number {
  const { energyEv, mu } = scan;
  const [from, to] = [energyEv[0]!, energyEv.at(-1)!];
  const anywhere = steepestRise(energyEv, mu, from + 5, to - 5);
  if (!element) {
    choices.push({
      what: 'E0',
      value: anywhere.e0.toFixed(2),
      why: 'steepest rise of the whole scan; no element was declared to check it',
    });
    return anywhere.e0;
  }
  const tabulated = edgeEnergyEv(elementBySymbol(element).Z, edge);
  const [low, high] = [tabulated + EDGE_SEARCH[0], tabulated + EDGE_SEARCH[1]];
  if (!(from < tabulated && to > tabulated)) {
    throw new InputError(
      `the ${element} ${edge} edge lies at ${tabulated} eV, the scan runs from ${from.toFixed(0)} to ${to.toFixed(0)} eV`,
    );
  }
  const near = steepestRise(energyEv, mu, low, high);
  if (anywhere.slope > 2 * near.slope && (anywhere.e0 < low || anywhere.e0 > high)) {
    throw new InputError(
      `the strongest rise is at ${anywhere.e0.toFixed(1)} eV, but the ${element} ${edge} edge lies at ${tabulated} eV; is the element or the energy scale wrong?`,
    );
  }
  choices.push({ what: 'E0', value: near.e0.toFixed(2), why: `steepest rise near the tabulated ${element} ${edge} edge, ${tabulated} eV` });
  return near.e0;
}

/**
 * Fit ranges of pre- and post-edge, given or by default, each with its reason put into `choices`.
 *
 * @throws {InputError} the scan begins too late for a pre-edge
 */
export function rangesFor(
  scan: { readonly energyEv: Float64Array },
  e0: number,
  options: ReduceOptions,
  element: string | undefined,
  edge: Edge,
  choices: Choice[],
) {
  const before = scan.energyEv[0]! - e0;
  let after = scan.energyEv.at(-1)! - e0;
  let end = 'the end of the scan';
  // The post-edge ends before the next edge of the same element
  if (element && (edge === 'L3' || edge === 'L2')) {
    const next =
      edgeEnergyEv(elementBySymbol(element).Z, edge === 'L3' ? 'L2' : 'L1') - edgeEnergyEv(elementBySymbol(element).Z, edge) - 30;
    if (next < after) {
      after = next;
      end = `30 eV before the ${edge === 'L3' ? 'L2' : 'L1'} edge`;
    }
  }
  if (!options.pre && before > -50) {
    throw new InputError(
      `the scan begins ${(-before).toFixed(0)} eV before the edge at ${e0.toFixed(1)} eV; 50 eV are needed for the pre-edge, or state a range`,
    );
  }
  const pre = options.pre ?? ([Math.max(-150, before), -30] as const);
  const post = options.post ?? ([Math.min(100, after / 3), after] as const);
  const form = options.preForm ?? 'line';
  const degree = options.postDegree ?? (post[1] - post[0] < SHORT_POST_EDGE ? 1 : 2);
  const words = ([a, b]: readonly [number, number]) => `${a.toFixed(0)} to ${b.toFixed(0)} eV`;
  const start = post[0] === 100 ? '100 eV above the edge, where the strong structure is over' : 'a third of a short scan';
  choices.push(
    {
      what: 'pre-edge',
      value: words(pre),
      why: options.pre
        ? 'given'
        : `default: from ${before > -150 ? 'where the scan begins' : '150 eV before the edge'} to where its foot begins`,
    },
    {
      what: 'pre-edge form',
      value: form,
      why: options.preForm ? 'given' : 'default: a line is common practice over so short a range',
    },
    { what: 'post-edge', value: words(post), why: options.post ? 'given' : `default: from ${start}, to ${end}` },
    {
      what: 'post-edge degree',
      value: `${degree}`,
      why:
        options.postDegree === undefined
          ? `default: the post-edge is ${degree === 1 ? 'shorter' : 'longer'} than ${SHORT_POST_EDGE} eV`
          : 'given',
    },
  );
  return { pre, post, form, degree, after };
}
