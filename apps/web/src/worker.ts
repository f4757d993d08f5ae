/** All computing happens here, off the page's thread. Faults travel as their message: an Error loses its class on the way. */
import {
  type Evidence,
  type Judgement,
  type JudgeOptions,
  judge,
  type Prediction,
  type PredictOptions,
  predict,
  readScan,
  readStructure,
  reduce,
  VERSION,
} from '@ringtrue/core';
import { expose } from 'comlink';

export interface TextFile {
  readonly file: string;
  readonly text: string;
}

export type Outcome = { readonly prediction: Prediction } | { readonly fault: string };

const api = {
  predict(file: string, text: string, options: Partial<PredictOptions> & { readonly absorber: string }): Outcome {
    try {
      const structure = readStructure(text, { fileName: file });
      return { prediction: predict(structure, options, { file, version: VERSION, now: () => performance.now() / 1000 }) };
    } catch (error) {
      return { fault: `${file}: ${error instanceof Error ? error.message : String(error)}` };
    }
  },

  /** Every candidate against the scans, which are repeats of one spectrum. */
  judge(
    candidates: readonly TextFile[],
    scans: readonly TextFile[],
    spectrum: Omit<Evidence, 'file' | 'reduction'>,
    options: JudgeOptions,
  ): { readonly judgement: Judgement } | { readonly fault: string } {
    try {
      const read = scans.map(({ file, text }) => about(file, () => readScan(text, {})));
      const file = scans.map((scan) => scan.file).join(', ');
      const element = /^[A-Z][a-z]?$/.test(spectrum.absorber) ? { element: spectrum.absorber } : {};
      const reduction = about(file, () => reduce(read, element));
      const structures = candidates.map((c) => ({
        file: c.file,
        structure: about(c.file, () => readStructure(c.text, { fileName: c.file })),
      }));
      const context = { version: VERSION, now: () => performance.now() / 1000 };
      return { judgement: judge(structures, [{ ...spectrum, file, reduction }], options, context) };
    } catch (error) {
      return { fault: error instanceof Error ? error.message : String(error) };
    }
  },
};

/** Errors of the core know the line but not the file; here it is named. */
function about<T>(file: string, work: () => T): T {
  try {
    return work();
  } catch (error) {
    throw new Error(`${file}: ${error instanceof Error ? error.message : String(error)}`);
  }
}

export type WorkerApi = typeof api;

expose(api);
