/** Any coordinate text to a Structure; what it is, is seen in the content and not in the file's ending. */
import { ReadError } from '../errors.js';
import { readCif } from './cif.js';
import { plainText } from './lines.js';
import { readPdb } from './pdb.js';
import type { Structure } from './types.js';
import { readXyz } from './xyz.js';

export interface ReadOptions {
  /** Only named in messages; says nothing about the format. */
  readonly fileName?: string;
  /** Every diagnostic of the reading becomes an error. */
  readonly strict?: boolean;
}

const PDB_RECORD =
  /^(HEADER|OBSLTE|TITLE |SPLIT |CAVEAT|COMPND|SOURCE|KEYWDS|EXPDTA|AUTHOR|REVDAT|SPRSDE|JRNL {2}|REMARK|DBREF|SEQRES|HET {2}|CRYST1|ORIGX|SCALE|MODEL |ATOM {2}|HETATM|LINK {2}|SSBOND|CONECT|USER {2}|NUMMDL|MTRIX)/;

/**
 * Reads XYZ (plain and extended, many frames), PDB, mmCIF or small-molecule CIF. The text may be 300 MB: it is walked, not split.
 * @throws {ReadError} naming line, columns and remedy; with `strict` also for what could be read round
 */
export function readStructure(text: string, options: ReadOptions = {}): Structure {
  const structure = readAny(plainText(text));
  const [first] = structure.diagnostics;
  if (options.strict && first) throw new ReadError(first.message, first.line === undefined ? {} : { line: first.line });
  return structure;
}

function readAny(text: string): Structure {
  const head = text.slice(0, 20_000);
  if (head.trim() === '') {
    if (text.trim() === '') throw new ReadError('the file is empty');
  }
  if (head.includes('\0')) throw new ReadError('the file is binary (compressed?); unpack it to plain text first');
  const first = (/^[^\S\n]*(\S[^\n]*)/m.exec(head)?.[1] ?? '').trim();
  if (/^\d+$/.test(first)) return readXyz(text);
  for (const raw of head.split('\n')) {
    if (PDB_RECORD.test(raw)) return readPdb(text);
    const line = raw.trim();
    if (line === '' || line.startsWith('#')) continue;
    if (/^data_/i.test(line)) return readCif(text);
    if (/^(_[A-Za-z]\S*|loop_)/i.test(line)) break;
  }
  if (/^\s*data_/im.test(head)) return readCif(text);
  throw new ReadError(
    `the file is neither XYZ (a count first), PDB (ATOM lines) nor CIF (data_ first); it starts with "${first.slice(0, 40)}"`,
    { line: 1, text: first },
  );
}
