/** What a sample is made of: a chemical formula, or elements with their parts by mass. */

import { InputError } from '../errors.js';
import { elementBySymbol } from './elements.js';

export interface Constituent {
  readonly Z: number;
  readonly symbol: string;
  /** Part of the mass; all parts add up to 1. */
  readonly massFraction: number;
}

/** Parts by mass that add up to less or more than this from 1 are a slip of the pen rather than of rounding. */
const FRACTION_SLACK = 0.01;

/**
 * Reads "Fe2O3", "Ca(OH)2", "Li0.5CoO2", or parts by mass "Fe:0.05,Si:0.44,O:0.51".
 *
 * @throws {InputError} an unknown element, a bracket without its partner, a number that is none, parts that do not add up to 1
 */
export function parseComposition(text: string): Constituent[] {
  const masses = text.includes(':') ? massParts(text) : formulaMasses(text);
  const total = [...masses.values()].reduce((sum, mass) => sum + mass, 0);
  return [...masses].map(([symbol, mass]) => ({ Z: elementBySymbol(symbol).Z, symbol, massFraction: mass / total }));
}

function massParts(text: string): Map<string, number> {
  const masses = new Map<string, number>();
  let sum = 0;
  for (const part of text.split(',')) {
    const [symbol, value, ...rest] = part.split(':').map((piece) => piece.trim());
    const mass = value ? Number(value) : Number.NaN;
    if (!(symbol && rest.length === 0 && mass > 0 && mass <= 1)) {
      throw new InputError(`composition "${text}": parts by mass like Fe:0.05,Si:0.44,O:0.51 are wanted, got "${part.trim()}"`);
    }
    const { symbol: name } = elementBySymbol(symbol);
    if (masses.has(name)) throw new InputError(`composition "${text}": ${name} is given twice`);
    masses.set(name, mass);
    sum += mass;
  }
  if (Math.abs(sum - 1) > FRACTION_SLACK) {
    throw new InputError(`composition "${text}": the parts by mass add up to ${sum.toFixed(3)}, 1 is wanted`);
  }
  return masses;
}

function formulaMasses(text: string): Map<string, number> {
  const formula = text.replace(/\s/g, '');
  const token = /([A-Z][a-z]?|\(|\))(\d+(?:\.\d+)?|\.\d+)?/y;
  const stack: Map<string, number>[] = [new Map()];
  const add = (to: Map<string, number>, symbol: string, amount: number) => to.set(symbol, (to.get(symbol) ?? 0) + amount);
  const wrong = (why: string) => new InputError(`composition "${text}": ${why}; a formula like Fe2O3 or Ca(OH)2 is wanted`);
  while (token.lastIndex < formula.length) {
    const at = token.lastIndex;
    const match = token.exec(formula);
    if (!match) throw wrong(`"${formula.slice(at)}" cannot be read`);
    const [, what, digits] = match;
    const amount = digits === undefined ? 1 : Number(digits);
    if (!(amount > 0)) throw wrong(`an amount of ${digits}`);
    if (what === '(') {
      if (digits !== undefined) throw wrong('a number follows "("');
      stack.push(new Map());
    } else if (what === ')') {
      const group = stack.pop()!;
      const outer = stack.at(-1);
      if (!outer) throw wrong('")" without its "("');
      for (const [symbol, mass] of group) add(outer, symbol, mass * amount);
    } else {
      const { symbol, mass } = elementBySymbol(what!);
      add(stack.at(-1)!, symbol, mass * amount);
    }
  }
  if (stack.length > 1) throw wrong('"(" without its ")"');
  if (stack[0]!.size === 0) throw wrong('no element');
  return stack[0]!;
}
