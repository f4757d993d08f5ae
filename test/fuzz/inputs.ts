/** Hostile text: files of the corpus spoiled in places, and files put together from fitting and unfitting parts. */
import * as fc from 'fast-check';
import type { CorpusFile } from './corpus.js';

// biome-ignore format: a list
const SPICE = ['\0', '\t', '\r', '\n', ' ', '"', "'", ';', '#', '_', '-', '.', ',', '(', ')', '9', '1e999', '-1e308', '5e-324', 'nan', 'Infinity', 'loop_', 'data_', 'save_', 'stop_', 'global_',
  'é', '\uFEFF', '\u202e', '\u001b[2J', '\u001b]0;x\u0007', '\ud800', '?', 'x', '/0', 'END\n', '__proto__', 'constructor', 'prototype', 'toString', '<script>', '../', '%s', '$(x)', '\n;\n', '1.0(5)', '0x10', '٣', '99999999999999999999'];

interface Edit {
  readonly kind: 'cut' | 'insert' | 'replace' | 'drop line' | 'double line' | 'swap lines' | 'byte' | 'repeat';
  readonly at: number;
  readonly other: number;
  readonly spice: string;
}

const edit: fc.Arbitrary<Edit> = fc.record({
  kind: fc.constantFrom<Edit['kind']>('cut', 'insert', 'replace', 'drop line', 'double line', 'swap lines', 'byte', 'repeat'),
  at: fc.double({ min: 0, max: 1, noNaN: true, maxExcluded: true }),
  other: fc.double({ min: 0, max: 1, noNaN: true, maxExcluded: true }),
  spice: fc.constantFrom(...SPICE),
});

function apply(text: string, { kind, at, other, spice }: Edit): string {
  const i = Math.floor(at * text.length);
  if (kind === 'cut') return text.slice(0, i);
  if (kind === 'insert') return text.slice(0, i) + spice + text.slice(i);
  if (kind === 'replace') return text.slice(0, i) + spice + text.slice(i + 1 + Math.floor(other * 8));
  if (kind === 'byte') return text.slice(0, i) + String.fromCharCode(Math.floor(other * 256)) + text.slice(i + 1);
  if (kind === 'repeat') return text.slice(0, i) + spice.repeat(Math.floor(other * 200)) + text.slice(i);
  const lines = text.split('\n');
  const [a, b] = [Math.floor(at * lines.length), Math.floor(other * lines.length)];
  if (kind === 'drop line') lines.splice(a, 1 + Math.floor(other * 3));
  else if (kind === 'double line') lines.splice(b, 0, lines[a]!);
  else [lines[a], lines[b]] = [lines[b]!, lines[a]!];
  return lines.join('\n');
}

export interface Input {
  readonly origin: string;
  readonly text: string;
}

/** A file of the corpus with one to four wounds. */
export const spoiled = (corpus: readonly CorpusFile[]): fc.Arbitrary<Input> =>
  fc
    .tuple(fc.nat(corpus.length - 1), fc.array(edit, { minLength: 1, maxLength: 4 }))
    .map(([n, edits]) => ({ origin: corpus[n]!.name, text: edits.reduce(apply, corpus[n]!.text) }));

const word = fc.oneof(
  { weight: 6, arbitrary: fc.constantFrom('Fe', 'S', 'O', 'Mn', 'H', 'X', '1', '0.5', '-0.25', '1.234(5)', '?', '.', '10', '90') },
  { weight: 2, arbitrary: fc.constantFrom(...SPICE) },
  { weight: 1, arbitrary: fc.string({ maxLength: 12, unit: 'binary' }) },
  { weight: 2, arbitrary: fc.double().map(String) },
  { weight: 2, arbitrary: fc.integer({ min: -20, max: 20 }).map(String) },
);
const lineOf = (least: number, most: number) => fc.array(word, { minLength: least, maxLength: most }).map((words) => words.join(' '));
const linesOf = (line: fc.Arbitrary<string>, most: number) => fc.array(line, { maxLength: most }).map((lines) => lines.join('\n'));

const xyz = fc
  .tuple(
    fc.oneof(fc.nat(6).map(String), word),
    fc.oneof(
      lineOf(0, 6),
      word.map((w) => `Lattice="${w} 0 0 0 5 0 0 0 5" pbc="${w} T F" units=${w}`),
    ),
    linesOf(lineOf(3, 6), 6),
  )
  .map(([count, comment, atoms]) => `${count}\n${comment}\n${atoms}\n`);

// biome-ignore format: a list
const TAGS = ['_atom_site_label', '_atom_site_type_symbol', '_atom_site_fract_x', '_atom_site_fract_y', '_atom_site_fract_z', '_atom_site_occupancy', '_atom_site_disorder_group', '_atom_site_disorder_assembly',
  '_atom_site.Cartn_x', '_atom_site.Cartn_y', '_atom_site.Cartn_z', '_atom_site.type_symbol', '_atom_site.label_alt_id', '_atom_site.pdbx_PDB_model_num', '_atom_site_U_iso_or_equiv', '___proto__', '_constructor'];
const OPERATORS = [
  "'x,y,z'",
  "'-x,-y,-z'",
  "'x,y,-z'",
  "'-y,x-y,z+1/3'",
  "'y,x,-z+1/2'",
  "'x,x,z'",
  "'2x,y,z'",
  "'x+1/0,y,z'",
  "''",
  "'-x,y'",
];
const cif = fc
  .tuple(
    fc.array(word, { minLength: 6, maxLength: 6 }),
    fc.array(fc.constantFrom(...OPERATORS), { maxLength: 5 }),
    fc.uniqueArray(fc.constantFrom(...TAGS), { minLength: 3, maxLength: 9 }),
    fc.array(word, { maxLength: 40 }),
    fc.boolean(),
  )
  .map(([cell, operators, tags, values, isUsual]) => {
    const sizes = isUsual ? ['8', '9', '10', '90', '95', '90'] : cell;
    const names = ['length_a', 'length_b', 'length_c', 'angle_alpha', 'angle_beta', 'angle_gamma'].map(
      (name, i) => `_cell_${name} ${sizes[i]}`,
    );
    return `data_x\n${names.join('\n')}\nloop_\n_space_group_symop_operation_xyz\n${operators.join('\n')}\nloop_\n${tags.join('\n')}\n${values.join(' ')}\n`;
  });

const field = (width: number, usual: string) =>
  fc
    .oneof({ weight: 8, arbitrary: fc.constant(usual) }, { weight: 1, arbitrary: word })
    .map((text) => text.slice(0, width).padStart(width));
const number = fc
  .oneof({ weight: 8, arbitrary: fc.double({ min: -30, max: 30, noNaN: true }).map((v) => v.toFixed(3)) }, { weight: 1, arbitrary: word })
  .map((text) => text.slice(0, 8).padStart(8));
const pdbAtom = fc
  .tuple(
    field(5, '    1'),
    fc.constantFrom(' CA ', 'CA  ', 'FE  ', ' O  ', ' SG '),
    fc.constantFrom(' ', 'A', 'B'),
    field(3, 'CYS'),
    field(4, '  12'),
    number,
    number,
    number,
    field(6, '  0.50'),
    field(6, ' 20.00'),
    fc.constantFrom('  ', 'FE', ' O', 'CA', 'ZZ', ' S'),
  )
  .map(
    ([serial, name, alternate, residue, sequence, x, y, z, occupancy, b, element]) =>
      `HETATM${serial} ${name}${alternate}${residue} A${sequence}    ${x}${y}${z}${occupancy}${b}          ${element}`,
  );
const pdbOther = fc.oneof(
  lineOf(2, 8).map((text) => `CRYST1 ${text}`),
  fc.constantFrom('CRYST1   20.000   30.000   40.000  90.00  90.00  90.00 P 21 21 21', 'MODEL        2', 'ENDMDL', 'TER', 'END'),
  lineOf(2, 8).map((text) => `LINK   ${text}`),
  fc
    .array(fc.integer({ min: -1, max: 9 }), { maxLength: 5 })
    .map((serials) => `CONECT${serials.map((s) => String(s).padStart(5)).join('')}`),
  lineOf(1, 6).map((text) => `REMARK   2 RESOLUTION. ${text}`),
);
const pdb = linesOf(fc.oneof({ weight: 5, arbitrary: pdbAtom }, { weight: 1, arbitrary: pdbOther }), 14);

const columns = fc
  .tuple(
    linesOf(
      lineOf(1, 4).map((text) => `# ${text}`),
      3,
    ),
    fc.constantFrom(' ', ',', '\t', ';', ' , '),
    fc.array(fc.array(word, { minLength: 1, maxLength: 4 }), { maxLength: 20 }),
  )
  .map(([head, between, rows]) => `${head}\n${rows.map((row) => row.join(between)).join('\n')}\n`);
const xdi = fc
  .tuple(
    fc.constantFrom('# XDI/1.0', '# XDI/1.0 x/1', '# XDI/9.9', '# XDI/'),
    linesOf(
      fc
        .tuple(
          fc.constantFrom(
            'Column.1',
            'Column.2',
            'Element.symbol',
            'Element.edge',
            'Mono.d_spacing',
            '__proto__.x',
            'Scan.start_time',
            'A',
          ),
          word,
        )
        .map(([name, value]) => `# ${name}: ${value}`),
      8,
    ),
    fc.constantFrom('# ---\n# e mu\n', '# ///\n# c\n# ---\n', '', '# ---\n'),
    linesOf(lineOf(2, 3), 12),
  )
  .map((parts) => parts.join('\n'));
/** A spectrum with an edge where iron's is, of random size, slope, noise and length: it reaches the reduction. */
const edgeScan = fc
  .tuple(
    fc.double({ min: -3, max: 3, noNaN: true }),
    fc.double({ min: -5, max: 3, noNaN: true }),
    fc.integer({ min: 5, max: 600 }),
    fc.double({ min: 0.2, max: 30, noNaN: true }),
    fc.nat(1000),
    fc.double({ min: 6900, max: 7120, noNaN: true }),
    fc.double({ min: -12, max: 0, noNaN: true }),
  )
  .map(([step, slope, count, width, seed, start, noise]) => {
    const rows = Array.from({ length: count }, (_, i) => {
      const e = start + i * width;
      const random = Math.sin(seed + i * 12.9898) * 43758.5453;
      return `${e.toFixed(3)} ${10 ** step / (1 + Math.exp((7112 - e) / 2)) + 10 ** slope * (e - start) + 10 ** noise * (random - Math.floor(random))}`;
    });
    return `# energy mu\n${rows.join('\n')}\n`;
  });

const made = (origin: string, text: fc.Arbitrary<string>): fc.Arbitrary<Input> => text.map((made) => ({ origin, text: made }));

export const structureInputs = (corpus: readonly CorpusFile[]): fc.Arbitrary<Input> =>
  fc.oneof({ weight: 4, arbitrary: spoiled(corpus) }, made('xyz', xyz), made('cif', cif), { weight: 2, arbitrary: made('pdb', pdb) });

export const scanInputs = (corpus: readonly CorpusFile[]): fc.Arbitrary<Input> =>
  fc.oneof({ weight: 4, arbitrary: spoiled(corpus) }, made('columns', columns), made('xdi', xdi), {
    weight: 2,
    arbitrary: made('edge', edgeScan),
  });
