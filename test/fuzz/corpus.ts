/** What is spoiled: the files of the torture sets, the demo files, and a few that try names JavaScript objects have of their own. */
import { readdirSync, readFileSync } from 'node:fs';

const FOLDERS = ['../external/structures/', '../external/crystals/', '../external/xdi/', '../../demo-structures/', './found/'];
const STRUCTURE = /\.(pdb|mmcif|cif|xyz)$/;
const SCAN = /\.(xdi|dat)$/;

export interface CorpusFile {
  readonly name: string;
  readonly text: string;
}

const all: readonly CorpusFile[] = FOLDERS.flatMap((folder) =>
  readdirSync(new URL(folder, import.meta.url))
    .filter((name) => STRUCTURE.test(name) || SCAN.test(name))
    .map((name) => ({ name, text: readFileSync(new URL(folder + name, import.meta.url), 'utf8') })),
);

export const STRUCTURES = all.filter(({ name }) => STRUCTURE.test(name));
export const SCANS = all.filter(({ name }) => SCAN.test(name));
