/** What is needed to do a run again: program, inputs by their checksum, every setting. Shared by all reports. */
import { type Block, facts, heading, list, paragraph } from './document.js';
import { numbered, type Reference, referenceText } from './references.js';

export interface RunRecord {
  /** As typed; '' where there was no command line. */
  readonly command: string;
  readonly inputs: readonly { readonly file: string; readonly bytes: number; readonly sha256: string }[];
}

/** Every value of an options object by its path: "options.radius". */
export function settingsOf(value: object, lead = ''): [string, string][] {
  return Object.entries(value).flatMap(([name, part]): [string, string][] => {
    if (part === undefined) return [];
    if (part !== null && typeof part === 'object' && !Array.isArray(part)) return settingsOf(part as object, `${lead}${name}.`);
    return [[`${lead}${name}`, Array.isArray(part) ? part.join(' to ') : String(part)]];
  });
}

export function reproducibility(version: string, record: RunRecord | undefined, settings: readonly (readonly [string, string])[]): Block[] {
  return [
    heading('Reproducibility'),
    facts([
      ['Program', `ringtrue ${version}`],
      ...(record?.command ? [['Command', record.command] as const] : []),
      ...(record?.inputs ?? []).map(({ file, bytes, sha256 }) => [`${file}, ${bytes} bytes`, `SHA-256 ${sha256}`] as const),
      ...settings,
    ]),
  ];
}

/** The paragraph with its numbers and the list they point to. */
export function methodsSection(marked: string): { readonly blocks: readonly Block[]; readonly references: readonly Reference[] } {
  const { text, references } = numbered(marked);
  return {
    blocks: [
      heading('Methods, in words that may be published'),
      paragraph(text),
      heading('References'),
      ...list(references.map((reference, i) => `[${i + 1}] ${referenceText(reference)}`)),
    ],
    references,
  };
}
