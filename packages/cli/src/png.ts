/** Figures as PNG at a stated resolution, 8 cm wide: one column of a journal. */
import { crc32 } from 'node:zlib';
import type { Resvg } from '@resvg/resvg-js';
import { InvalidArgumentError } from 'commander';
import { UsageError } from './command.js';
import { plain } from './terminal.js';

const WIDTH_CM = 8;
const CM_PER_INCH = 2.54;

export function dpi(text: string): number {
  const value = Number(text);
  if (!(Number.isInteger(value) && value >= 72 && value <= 2400))
    throw new InvalidArgumentError(`dots per inch are wanted, a whole number from 72 to 2400, got "${plain(text)}".`);
  return value;
}

/**
 * The figures among the files of a result, each also as PNG beside its SVG.
 * @throws {UsageError} this machine has no font to write with
 */
export async function withPngs(files: ReadonlyMap<string, string>, dotsPerInch: number): Promise<Map<string, string | Uint8Array>> {
  const { Resvg: Renderer } = await import('@resvg/resvg-js');
  checkFonts(Renderer);
  const all = new Map<string, string | Uint8Array>();
  for (const [name, content] of files) {
    all.set(name, content);
    if (!name.endsWith('.svg')) continue;
    const image = new Renderer(content, {
      fitTo: { mode: 'width', value: Math.round((WIDTH_CM / CM_PER_INCH) * dotsPerInch) },
      font: { loadSystemFonts: true },
    });
    all.set(name.replace(/\.svg$/, '.png'), withResolution(image.render().asPng(), dotsPerInch));
  }
  return all;
}

/** Without any font text would be left out of the picture silently. */
function checkFonts(Renderer: typeof Resvg): void {
  const letter = new Renderer(
    '<svg xmlns="http://www.w3.org/2000/svg" width="20" height="20"><text y="15" font-family="sans-serif">M</text></svg>',
    {
      font: { loadSystemFonts: true },
    },
  );
  if (letter.getBBox() === undefined)
    throw new UsageError('--png: no font is installed to write the figures with; install any sans-serif font, or take the SVG files');
}

/** The PNG with its resolution written in (chunk pHYs, PNG third edition, 11.3.4.3), before the image data. */
function withResolution(png: Buffer, dotsPerInch: number): Buffer {
  const body = Buffer.alloc(13);
  body.write('pHYs', 0, 'latin1');
  const perMetre = Math.round((100 * dotsPerInch) / CM_PER_INCH);
  body.writeUInt32BE(perMetre, 4);
  body.writeUInt32BE(perMetre, 8);
  body.writeUInt8(1, 12);
  const chunk = Buffer.alloc(21);
  chunk.writeUInt32BE(9, 0);
  body.copy(chunk, 4);
  chunk.writeUInt32BE(crc32(body), 17);
  // Signature 8 bytes, IHDR 25: the next chunk begins at 33.
  return Buffer.concat([png.subarray(0, 33), chunk, png.subarray(33)]);
}
