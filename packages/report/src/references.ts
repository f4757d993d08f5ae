/** Published methods that Ringtrue uses, by a short key: what the methods paragraph cites, as text and as BibTeX. */
export interface Reference {
  readonly key: string;
  readonly authors: readonly string[];
  readonly journal: string;
  readonly volume: string;
  readonly page: string;
  readonly year: number;
  readonly doi?: string;
}

const entry = (key: string, authors: string, journal: string, volume: string, page: string, year: number, doi?: string): Reference => ({
  key,
  authors: authors.split(', '),
  journal,
  volume,
  page,
  year,
  ...(doi === undefined ? {} : { doi }),
});

const PRB = 'Phys. Rev. B';
/** DOIs are given where the publisher builds them from volume and page. */
const LIST: readonly Reference[] = [
  entry('barth1972', 'von Barth, Hedin', 'J. Phys. C', '5', '1629', 1972),
  entry('mattheiss1964', 'Mattheiss', 'Phys. Rev.', '133', 'A1399', 1964, '10.1103/PhysRev.133.A1399'),
  entry('hedin1969', 'Hedin, Lundqvist', 'Solid State Phys.', '23', '1', 1969),
  entry('hara1967', 'Hara', 'J. Phys. Soc. Jpn', '22', '710', 1967),
  entry('campbell2001', 'Campbell, Papp', 'At. Data Nucl. Data Tables', '77', '1', 2001),
  entry('rehr1990', 'Rehr, Albers', PRB, '41', '8139', 1990, '10.1103/PhysRevB.41.8139'),
  entry('sevillano1979', 'Sevillano, Meuth, Rehr', PRB, '20', '4908', 1979, '10.1103/PhysRevB.20.4908'),
  entry('poiarkova1999', 'Poiarkova, Rehr', PRB, '59', '948', 1999, '10.1103/PhysRevB.59.948'),
  entry('rappe1992', 'Rappé, Casewit, Colwell, Goddard, Skiff', 'J. Am. Chem. Soc.', '114', '10024', 1992),
  entry('bunker1983', 'Bunker', 'Nucl. Instrum. Meth.', '207', '437', 1983),
  entry('tranquada1983', 'Tranquada, Ingalls', PRB, '28', '3520', 1983, '10.1103/PhysRevB.28.3520'),
  entry('newville1993', 'Newville, Livins, Yacoby, Rehr, Stern', PRB, '47', '14126', 1993, '10.1103/PhysRevB.47.14126'),
  entry('newville1999', 'Newville, Boyanov, Sayers', 'J. Synchrotron Rad.', '6', '264', 1999),
  entry('stern1993', 'Stern', PRB, '48', '9825', 1993, '10.1103/PhysRevB.48.9825'),
  entry('cruickshank1999', 'Cruickshank', 'Acta Cryst.', 'D55', '583', 1999),
  entry('blow2002', 'Blow', 'Acta Cryst.', 'D58', '792', 2002),
  entry('brown1985', 'Brown, Altermatt', 'Acta Cryst.', 'B41', '244', 1985),
  entry('gavish2014', 'Gavish, Donoho', 'IEEE Trans. Inf. Theory', '60', '5040', 2014),
];

const BY_KEY = new Map(LIST.map((reference) => [reference.key, reference]));

/** Text whose [@key] marks become numbers in the order of first citation, and the references in that order. */
export function numbered(text: string): { readonly text: string; readonly references: readonly Reference[] } {
  const order: string[] = [];
  const withNumbers = text.replace(/\[((?:@\w+(?:, )?)+)\]/g, (_, keys: string) => {
    const numbers = keys.split(', ').map((marked) => {
      const key = marked.slice(1);
      if (!BY_KEY.has(key)) throw new RangeError(`references: there is no "${key}"`);
      if (!order.includes(key)) order.push(key);
      return order.indexOf(key) + 1;
    });
    return `[${numbers.join(', ')}]`;
  });
  return { text: withNumbers, references: order.map((key) => BY_KEY.get(key)!) };
}

/** "J. J. Rehr" as the list has it: "Rehr & Albers, Phys. Rev. B 41, 8139 (1990), doi:…" */
export function referenceText({ authors, journal, volume, page, year, doi }: Reference): string {
  const names = authors.length > 1 ? `${authors.slice(0, -1).join(', ')} & ${authors.at(-1)}` : authors[0];
  return `${names}, ${journal} ${volume}, ${page} (${year})${doi ? `, doi:${doi}` : ''}`;
}

/** One entry each, UTF-8; family names only, as the sources in the program are given. */
export const bibtex = (references: readonly Reference[]): string =>
  references
    .map(({ key, authors, journal, volume, page, year, doi }) =>
      [
        `@article{${key},`,
        `  author  = {${authors.map((name) => (name.includes(' ') ? `{${name}}` : name)).join(' and ')}},`,
        `  journal = {${journal}},`,
        `  volume  = {${volume}},`,
        `  pages   = {${page}},`,
        `  year    = {${year}}${doi ? ',' : ''}`,
        ...(doi ? [`  doi     = {${doi}}`] : []),
        '}',
      ].join('\n'),
    )
    .join('\n\n')
    .concat('\n');
