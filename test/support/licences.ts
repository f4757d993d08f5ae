/** The libraries that ship with Ringtrue, whatever they need included, as LICENCES.md lists them: `npm run licences` writes it. */
import { readFileSync, writeFileSync } from 'node:fs';
import { pathToFileURL } from 'node:url';

const ROOT = new URL('../../', import.meta.url);

interface LockEntry {
  readonly version?: string;
  readonly license?: string;
  readonly link?: boolean;
  readonly dependencies?: Readonly<Record<string, string>>;
  readonly optionalDependencies?: Readonly<Record<string, string>>;
}

export const LICENCES = new URL('LICENCES.md', ROOT);

export interface Shipped {
  readonly name: string;
  readonly version: string;
  readonly licence: string;
}

/** All that the workspaces' dependencies reach in the lock file, the workspaces themselves left out; by name. */
export function shippedLibraries(): Shipped[] {
  const { packages } = JSON.parse(readFileSync(new URL('package-lock.json', ROOT), 'utf8')) as { packages: Record<string, LockEntry> };
  const reached = new Map<string, LockEntry>();
  const follow = (from: string, { dependencies = {}, optionalDependencies = {} }: LockEntry): void => {
    for (const name of Object.keys({ ...dependencies, ...optionalDependencies })) {
      // The nearest copy: inside the one who wants it, else beside it, and so on outwards.
      let folder = from;
      while (folder !== '' && !packages[`${folder}/node_modules/${name}`])
        folder = folder.includes('/') ? folder.slice(0, folder.lastIndexOf('/')) : '';
      const path = folder === '' ? `node_modules/${name}` : `${folder}/node_modules/${name}`;
      const entry = packages[path];
      if (!entry) throw new Error(`${name} is not in the lock file`);
      if (entry.link || reached.has(path)) continue;
      reached.set(path, entry);
      follow(path, entry);
    }
  };
  for (const [path, entry] of Object.entries(packages)) if (/^(packages|apps)\/[^/]+$/.test(path)) follow(path, entry);
  return [...reached]
    .map(([path, { version = '', license = 'not stated' }]) => ({
      name: path.slice(path.lastIndexOf('node_modules/') + 13),
      version,
      licence: license,
    }))
    .sort((a, b) => (a.name < b.name ? -1 : a.name > b.name ? 1 : 0));
}

export function licencesText(): string {
  const rows = [['library', 'version', 'licence'], ...shippedLibraries().map(({ name, version, licence }) => [name, version, licence])];
  const widths = [0, 1, 2].map((column) => Math.max(...rows.map((row) => row[column]!.length)));
  const lines = rows.map((row) => `| ${row.map((cell, i) => cell.padEnd(widths[i]!)).join(' | ')} |`);
  const rule = `| ${widths.map((width) => '-'.repeat(width)).join(' | ')} |`;
  const table = [lines[0], rule, ...lines.slice(1)].join('\n');
  return `# Licences of what ships with Ringtrue\n\nMade by \`npm run licences\` from the lock file; Ringtrue itself is MIT (LICENSE).\n\n${table}\n`;
}

if (process.argv[1] !== undefined && import.meta.url === pathToFileURL(process.argv[1]).href) writeFileSync(LICENCES, licencesText());
