/** A file of many frames, read as a stream: XYZ piece by piece, other formats by their models. */
import { closeSync, createReadStream, openSync, readSync, statSync } from 'node:fs';
import { type EnsembleFrame, readStructure, type Structure, structureOfFrame, type XyzFrame, XyzFrames } from '@ringtrue/core';
import { UsageError } from './command.js';
import { readText } from './files.js';

export interface FrameSource {
  /** The first frame. */
  readonly first: Structure;
  /** Every frame in order, from the start at each call; `onPart` hears which part of the file was read. */
  frames(onPart?: (part: number) => void): AsyncGenerator<EnsembleFrame>;
}

/** @throws {UsageError} absent or unreadable @throws {ReadError} not a structure */
export async function openFrames(file: string): Promise<FrameSource> {
  if (!isXyz(file)) {
    const structure = readStructure(readText(file), { fileName: file });
    const all = [structure.atoms, ...structure.moreFrames];
    return {
      first: { ...structure, moreFrames: [] },
      async *frames(onPart) {
        for (const [i, atoms] of all.entries()) {
          onPart?.(i / all.length);
          yield { atoms };
        }
      },
    };
  }
  const reader = new XyzFrames();
  let first: Structure | undefined;
  for await (const frame of xyzFrames(file, reader)) {
    first = structureOfFrame(frame, reader.diagnostics);
    break;
  }
  if (!first) throw new UsageError(`${file}: the file holds no frame`);
  return { first, frames: (onPart) => xyzFrames(file, new XyzFrames(), onPart) };
}

async function* xyzFrames(file: string, reader: XyzFrames, onPart?: (part: number) => void): AsyncGenerator<XyzFrame> {
  const { size } = statSync(file);
  const stream = createReadStream(file, { encoding: 'utf8', highWaterMark: 1 << 18 });
  try {
    for await (const chunk of stream) {
      yield* reader.push(chunk as string);
      onPart?.(stream.bytesRead / size);
    }
    yield* reader.end();
  } finally {
    stream.destroy();
  }
}

/** A file that starts with a count alone on its line. */
function isXyz(file: string): boolean {
  let text: string;
  try {
    const handle = openSync(file, 'r');
    const start = Buffer.alloc(4096);
    const read = readSync(handle, start, 0, start.length, 0);
    closeSync(handle);
    text = start.toString('utf8', 0, read);
  } catch {
    readText(file); // says what is wrong
    throw new UsageError(`${file}: cannot be read`);
  }
  return /^\uFEFF?\s*\d+[^\S\n]*\r?\n/.test(text);
}
