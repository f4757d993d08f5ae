/**
 * The library reference: every export of the packages' index files with its docstring and its declaration. Read from the text, since the
 * compiler has no programming interface: the code's own form (a docstring above an exported declaration at the left margin) is all it needs.
 */
import { existsSync, readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const ROOT = fileURLToPath(new URL('../../', import.meta.url));

interface Found {
  readonly file: string;
  readonly doc: string;
  readonly declaration: string;
}

/** Names of an index file with the file each comes from. */
function exportsOf(file: string): { name: string; own: string; from: string }[] {
  const text = readFileSync(file, 'utf8').replace(/\/\*[\s\S]*?\*\//g, '');
  return [...text.matchAll(/export (?:type )?\{([^}]*)\} from '([^']+)'/g)].flatMap(([, names, from]) =>
    names!
      .split(',')
      .map((name) => name.trim().replace(/^type /, ''))
      .filter((name) => name !== '')
      .map((name) => {
        const [own, as] = name.split(/ as /) as [string, string?];
        return { own, name: as ?? own, from: join(dirname(file), from!.replace(/\.js$/, '.ts')) };
      }),
  );
}

/** @throws {Error} an export whose declaration is not found: the reference would be silent about it */
function find(name: string, file: string): Found {
  if (!existsSync(file)) throw new Error(`${file}: no such file, wanted for ${name}`);
  const text = readFileSync(file, 'utf8');
  const at = new RegExp(`^export (?:declare )?(?:async )?(?:abstract )?(function|class|interface|type|const) ${name}\\b`, 'm').exec(text);
  if (at) {
    const doc = /\/\*\*((?:(?!\*\/)[\s\S])*)\*\/\s*$/.exec(text.slice(0, at.index))?.[1] ?? '';
    return { file, doc: cleaned(doc), declaration: declarationAt(text, at.index, at[1]!) };
  }
  const again = exportsOf(file).find((entry) => entry.name === name);
  if (again) return find(again.own, again.from);
  throw new Error(`${file}: ${name} is exported but not declared in a form that is understood`);
}

const cleaned = (doc: string): string =>
  doc
    .split('\n')
    .map((line) => line.replace(/^\s*\* ?/, '').trimEnd())
    .join('\n')
    .trim()
    .replace(/^@(param|returns|throws|example)\b/gm, '\n**$1**')
    .replace(/</g, '&lt;')
    .replace(/\n{3,}/g, '\n\n')
    .trim();

/** Interfaces and types whole; functions, classes and constants to where their body begins. */
function declarationAt(text: string, start: number, kind: string): string {
  const rest = text.slice(start);
  if (kind === 'interface' || kind === 'type') {
    const end = /^(?:\}|.*;)$/m.exec(kind === 'interface' ? rest.replace(/^[ \t].*;$/gm, (line) => line.replace(/;$/, ' ')) : rest);
    const whole = rest.slice(0, end ? end.index + end[0].length : 0);
    return kind === 'type' && /^export type \w+[^;]*\{$/m.test(whole.split('\n')[0]!) ? rest.slice(0, rest.indexOf('\n}') + 3) : whole;
  }
  const body = /(?: \{$|\{\n {2}(?=[a-z]+[ (.])|=> |= )/m.exec(rest.slice(0, 4000).replace(/\{\n( {4,}|\s*\}|\s{2}readonly)/g, '(\n$1'));
  const head = kind === 'function' ? functionHead(rest) : rest.slice(0, body ? body.index : rest.indexOf('\n'));
  return head.trimEnd();
}

/** To the brace that opens the body: the first at depth zero after the parameters. */
function functionHead(rest: string): string {
  let depth = 0;
  let passed = false;
  for (let i = 0; i < rest.length; i++) {
    const sign = rest[i]!;
    if (sign === '{' && depth === 0 && passed && /[)\w\]>}'] $/.test(rest.slice(0, i)) && !/[:|&] $/.test(rest.slice(0, i)))
      return rest.slice(0, i);
    if ('([{'.includes(sign)) depth++;
    if (')]}'.includes(sign)) {
      depth--;
      if (sign === ')' && depth === 0) passed = true;
    }
  }
  return rest.slice(0, rest.indexOf('\n'));
}

export function libraryPage(): string {
  const parts = ['core', 'figures', 'report'].map((name) => {
    const index = join(ROOT, `packages/${name}/src/index.ts`);
    const lead = cleaned(/^\/\*\*([\s\S]*?)\*\//.exec(readFileSync(index, 'utf8'))?.[1] ?? '');
    const entries = exportsOf(index)
      .map((entry) => ({ name: entry.name, ...find(entry.own, entry.from) }))
      .sort((a, b) => (a.name.toLowerCase() < b.name.toLowerCase() ? -1 : 1))
      .map((entry) => `### ${entry.name}\n\n${entry.doc ? `${entry.doc}\n\n` : ''}\`\`\`typescript\n${entry.declaration.trim()}\n\`\`\`\n`);
    return `## @ringtrue/${name}\n\n${lead}\n\n${entries.join('\n')}`;
  });
  return `# Library\n\nMade by \`npm run docs\` from the code. Å, Å⁻¹, Å², eV and K unless a line says otherwise.\n\n${parts.join('\n')}`;
}
