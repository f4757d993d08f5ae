/** Reading what the user names and writing results whole or not at all. */
import { existsSync, mkdirSync, readFileSync, renameSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { UsageError } from './command.js';

/** Larger files are refused before they are read, bytes: the limit of one string in Node is 512 MB. */
const LARGEST_FILE = 300e6;

/** @throws {UsageError} absent, unreadable, a folder, or too large */
export function readText(path: string): string {
  try {
    const { size } = statSync(path);
    if (size > LARGEST_FILE)
      throw new UsageError(
        `${path}: ${Math.round(size / 1e6)} MB is more than the ${LARGEST_FILE / 1e6} MB that are read; cut out the part around the absorber`,
      );
    return readFileSync(path, 'utf8');
  } catch (error) {
    if (error instanceof UsageError) throw error;
    throw new UsageError(`${path}: ${reasonOf(error)}`);
  }
}

/**
 * Write the files of a result. A new folder appears whole: it is filled under a temporary name beside its place and renamed. In a
 * folder that exists other files are left alone; its result.json goes first and comes last, each file renamed into place, so that a
 * folder with a result.json is complete either way.
 */
export function writeFolder(folder: string, files: ReadonlyMap<string, string | Uint8Array>): void {
  const staged = `${folder.replace(/[/\\]+$/, '')}.part-${process.pid}`;
  try {
    if (existsSync(folder) && !statSync(folder).isDirectory()) throw Object.assign(new Error('not a folder'), { code: 'EEXIST' });
    for (const [name, content] of files) {
      // Names are the program's own; one that came from a file must not lead out of the folder.
      if (!/^[\w-]+(\.[\w-]+)*(\/[\w-]+(\.[\w-]+)*)*$/.test(name)) throw new Error(`"${name}" is no name for a result`);
      const path = join(staged, name);
      mkdirSync(dirname(path), { recursive: true });
      writeFileSync(path, content);
    }
    if (!existsSync(folder)) {
      renameSync(staged, folder);
      return;
    }
    rmSync(join(folder, 'result.json'), { force: true });
    for (const name of [...files.keys()].sort((a, b) => Number(a === 'result.json') - Number(b === 'result.json'))) {
      mkdirSync(dirname(join(folder, name)), { recursive: true });
      renameSync(join(staged, name), join(folder, name));
    }
  } catch (error) {
    throw new UsageError(`cannot write to ${folder}: ${reasonOf(error)}`);
  } finally {
    if (existsSync(staged)) rmSync(staged, { recursive: true, force: true });
  }
}

const REASONS: Readonly<Record<string, string>> = {
  ENOENT: 'no such file',
  EISDIR: 'is a folder, a file is wanted',
  EACCES: 'no permission',
  EEXIST: 'a file stands where a folder is wanted',
  ENOTDIR: 'a part of the path is no folder',
  ENOSPC: 'the disk is full',
  EROFS: 'the disk is read-only',
};

function reasonOf(error: unknown): string {
  const code = (error as { code?: string }).code ?? '';
  return REASONS[code] ?? (error instanceof Error ? error.message : String(error));
}
