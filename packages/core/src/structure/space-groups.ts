/**
 * Operators of a space group by its name, for files that list none. The table (530 settings) is @chemistry/space-groups; every
 * one of its operator lists is a closed group. Here stand only the ways the world writes the names.
 */
import { SpaceGroupsData } from '@chemistry/space-groups';
import { parseOperator, tidyOperators } from './operators.js';
import type { Cell, SymmetryOperator } from './types.js';

export interface SpaceGroupChoice {
  readonly name: string;
  readonly operators: readonly SymmetryOperator[];
  /** Set when the name alone does not tell the setting: what was taken. */
  readonly assumed?: string;
}

interface Setting {
  readonly id: number;
  readonly hm: string;
  readonly hs: string;
  readonly s: readonly string[];
}

const squeeze = (name: string): string => name.toLowerCase().replace(/[\s_'"]/g, '');
let byName: Map<string, Setting[]> | undefined;

function settings(): Map<string, Setting[]> {
  if (byName) return byName;
  byName = new Map();
  const add = (key: string, setting: Setting) => {
    const list = byName!.get(squeeze(key));
    if (!list) byName!.set(squeeze(key), [setting]);
    else if (!list.includes(setting)) list.push(setting);
  };
  for (const setting of SpaceGroupsData as readonly Setting[]) {
    add(setting.hm, setting);
    // "P 21/c" for "P 1 21/c 1": the short symbol means the unique axis b, International Tables A.
    const short = /^(\w) 1 (\S+) 1$/.exec(setting.hm);
    if (short) add(`${short[1]} ${short[2]}`, setting);
    // "F m 3 m", the symbol before 1983, for "F m -3 m".
    if (setting.id >= 200 && setting.hm.includes('-3')) add(setting.hm.replace('-3', '3'), setting);
  }
  return byName;
}

const isHexagonal = (cell: Cell): boolean => Math.abs(cell.gamma - 120) < 0.01 && Math.abs(cell.alpha - 90) < 0.01;

/**
 * Operators by Hermann–Mauguin name (full or short, with ":1", ":2", ":H", ":R" or the archive's "H 3"), or undefined when no such
 * group is known. Where a name has several settings: R groups follow the cell's axes; of two origins the first is taken, and said.
 */
export function spaceGroupByName(written: string, cell: Cell): SpaceGroupChoice | undefined {
  const [, base = '', suffix = ''] = /^(.*?)\s*(?::\s*([12HRhrabc-]+\d?))?\s*$/.exec(written.trim()) ?? [];
  const name = base.replace(/^H\s*(?=-?3)/i, 'R ').replace(/^(R.*\S)\s+H$/i, '$1');
  const found = settings().get(squeeze(name));
  return found && choose(found, suffix.toUpperCase(), cell);
}

/** Operators by Hall symbol. */
export function spaceGroupByHall(hall: string): SpaceGroupChoice | undefined {
  const wanted = squeeze(hall);
  const setting = (SpaceGroupsData as readonly Setting[]).find(
    ({ hs }) => squeeze(hs.replace(/"/g, '=')) === squeeze(hall.replace(/"/g, '=')) || squeeze(hs) === wanted,
  );
  return setting && { name: setting.hm, operators: operatorsOf(setting) };
}

/** Operators by the number in International Tables (standard setting). */
export function spaceGroupByNumber(number: number, cell: Cell): SpaceGroupChoice | undefined {
  const first = (SpaceGroupsData as readonly Setting[]).find(({ id }) => id === number);
  if (!first) return undefined;
  const choice = choose(settings().get(squeeze(first.hm))!, '', cell);
  return { ...choice, assumed: choice.assumed ?? `the standard setting of number ${number}, ${first.hm}` };
}

function choose(found: readonly Setting[], suffix: string, cell: Cell): SpaceGroupChoice {
  const first = found[0]!;
  const answer = (setting: Setting, assumed?: string): SpaceGroupChoice => ({
    name: setting.hm,
    operators: operatorsOf(setting),
    ...(assumed ? { assumed } : {}),
  });
  const second = found.find((setting) => setting !== first && setting.hm === first.hm);
  if (!second) return answer(first);
  if (first.hm.startsWith('R')) return answer(suffix === 'H' || (suffix !== 'R' && isHexagonal(cell)) ? first : second);
  if (suffix.startsWith('2')) return answer(second);
  return answer(first, suffix.startsWith('1') ? undefined : `origin choice 1 of ${first.hm}`);
}

const operatorsOf = (setting: Setting): readonly SymmetryOperator[] => tidyOperators(setting.s.map((text) => parseOperator(text)));
