/** All computing happens here, off the page's thread. Faults travel as their message: an Error loses its class on the way. */
import { type Prediction, type PredictOptions, predict, readStructure, VERSION } from '@ringtrue/core';
import { expose } from 'comlink';

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
};

export type WorkerApi = typeof api;

expose(api);
