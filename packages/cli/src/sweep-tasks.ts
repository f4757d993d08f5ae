/**
 * What a sweep is to do: one task a candidate, from a folder of coordinate files or a manifest. A manifest is CSV with a heading, or
 * JSON Lines; its columns are named like judge's options (file, data, absorber, edge, temperature, k-range, …) and go before
 * those of the command line. Files stand relative to the manifest.
 */
import { readdirSync, statSync } from 'node:fs';
import { dirname, extname, join, resolve } from 'node:path';
import { csvParseRows } from 'd3-dsv';
import { UsageError } from './command.js';
import { readText } from './files.js';
import { plain } from './terminal.js';

export interface SweepTask {
  /** As it is named in the results: relative to the folder or manifest. */
  readonly file: string;
  readonly path: string;
  /** Command-line options of its own, in the words of judge, e.g. ['--temperature', '10']. */
  readonly options: readonly string[];
}

const STRUCTURE_ENDINGS = new Set(['.xyz', '.extxyz', '.pdb', '.ent', '.cif', '.mmcif']);

/** Columns of a manifest beside `file`: options of judge that take a value. */
const COLUMNS = new Set([
  'data',
  'absorber',
  'edge',
  'temperature',
  'k-range',
  'r-range',
  'k-weight',
  'thermal',
  'debye-temperature',
  'self-energy',
  'radius',
  'max-legs',
  'coordinate-sd',
  'sample-spread',
  'model-error',
  'columns',
  'e0',
  'element',
]);
/** Of these, the values that name files. */
const FILE_COLUMNS = new Set(['data']);

/** More would not fit a summary anyone reads; the limit keeps a mistaken folder from filling the memory. */
const MOST_TASKS = 1_000_000;

/** @throws {UsageError} nothing there to judge, a manifest that cannot be read: file, line, what is wrong, what would be right */
export function sweepTasks(source: string): { readonly tasks: readonly SweepTask[]; readonly notes: readonly string[] } {
  let isFolder: boolean;
  try {
    isFolder = statSync(source).isDirectory();
  } catch {
    throw new UsageError(`${source}: no such folder or manifest`);
  }
  const found = isFolder ? ofFolder(source) : ofManifest(source);
  if (found.tasks.length > MOST_TASKS)
    throw new UsageError(`${source}: ${found.tasks.length} candidates; at most ${MOST_TASKS} in one sweep`);
  const seen = new Set<string>();
  for (const task of found.tasks) {
    const key = JSON.stringify([task.file, task.options]);
    if (seen.has(key)) throw new UsageError(`${source}: ${plain(task.file)} is listed twice with the same options`);
    seen.add(key);
  }
  return found;
}

function ofFolder(folder: string): ReturnType<typeof sweepTasks> {
  const names = readdirSync(folder, { withFileTypes: true }).flatMap((entry) => (entry.isFile() ? [entry.name] : []));
  const isStructure = (name: string): boolean => STRUCTURE_ENDINGS.has(extname(name).toLowerCase());
  const tasks = names
    .filter(isStructure)
    .sort()
    .map((file) => ({ file, path: join(folder, file), options: [] }));
  if (tasks.length === 0)
    throw new UsageError(`${folder}: no coordinate files (${[...STRUCTURE_ENDINGS].join(', ')}) among its ${names.length} files`);
  const others = names.length - tasks.length;
  return { tasks, notes: others > 0 ? [`${others} other files in the folder are left alone`] : [] };
}

function ofManifest(path: string): ReturnType<typeof sweepTasks> {
  const text = readText(path).replace(/^\uFEFF/, '');
  const isJson = text.trimStart().startsWith('{');
  const rows = isJson ? jsonRows(path, text) : csvRows(path, text);
  if (rows.length === 0)
    throw new UsageError(`${path}: no candidates; a heading and a line for each, or one JSON object a line, are wanted`);
  const folder = dirname(path);
  const tasks = rows.map(({ line, values }) => {
    const file = values.get('file');
    if (!file) throw new UsageError(`${path}: line ${line}: no file is named`);
    const options = [...values].flatMap(([name, value]) => {
      if (name === 'file' || value === '') return [];
      if (!COLUMNS.has(name))
        throw new UsageError(`${path}: line ${line}: "${plain(name)}" is no column; file, ${[...COLUMNS].join(', ')} are`);
      return [`--${name}`, FILE_COLUMNS.has(name) ? filesBeside(folder, value) : value];
    });
    return { file, path: resolve(folder, file), options };
  });
  return { tasks, notes: [] };
}

const filesBeside = (folder: string, value: string): string =>
  value
    .split(',')
    .map((file) => resolve(folder, file.trim()))
    .join(',');

interface Row {
  readonly line: number;
  readonly values: ReadonlyMap<string, string>;
}

function csvRows(path: string, text: string): Row[] {
  const [heading, ...rows] = csvParseRows(text);
  const names = (heading ?? []).map((name) => name.trim());
  if (!names.includes('file')) throw new UsageError(`${path}: line 1: a column named "file" is wanted, got ${names.map(plain).join(', ')}`);
  return rows.flatMap((cells, i): Row[] => {
    if (cells.length === 1 && cells[0]!.trim() === '') return [];
    if (cells.length !== names.length)
      throw new UsageError(`${path}: line ${i + 2}: ${names.length} cells are wanted as in the heading, got ${cells.length}`);
    return [{ line: i + 2, values: new Map(names.map((name, c) => [name, cells[c]!.trim()])) }];
  });
}

function jsonRows(path: string, text: string): Row[] {
  return text.split('\n').flatMap((content, i): Row[] => {
    if (content.trim() === '') return [];
    const wrong = (what: string): UsageError => new UsageError(`${path}: line ${i + 1}: ${what}`);
    let value: unknown;
    try {
      value = JSON.parse(content);
    } catch {
      throw wrong('no JSON object; one whole object a line is wanted');
    }
    if (typeof value !== 'object' || value === null || Array.isArray(value)) throw wrong('a JSON object is wanted');
    const values = new Map<string, string>();
    for (const [name, field] of Object.entries(value)) {
      const parts = Array.isArray(field) ? field : [field];
      if (!parts.every((part) => typeof part === 'string' || typeof part === 'number'))
        throw wrong(`"${plain(name)}" must be a text, a number or a list of them`);
      values.set(name, parts.join(','));
    }
    return [{ line: i + 1, values }];
  });
}
