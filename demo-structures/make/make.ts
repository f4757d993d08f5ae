/**
 * Writes the demo files: `npm run demo-files`. With `--truth [names]` the hidden ensembles are computed anew first (minutes each).
 */
import { writeFileSync } from 'node:fs';
import { demoFiles, truthFile } from './demo-files.js';
import { SHORT } from './ensemble-chi.js';
import { TRUTHS, truth } from './truth.js';

const [flag, ...wanted] = process.argv.slice(2);
if (flag === '--truth') {
  for (const name of TRUTHS.filter((one) => wanted.length === 0 || wanted.includes(one))) {
    const { k, chi, short } = truth(name);
    const rows = Array.from(k, (q, i) => `${q.toFixed(2)},${chi[i]!.toFixed(7)},${short[i]!.toFixed(7)}`);
    writeFileSync(
      truthFile(name),
      `# Invented: chi(k) of the hidden ensemble of ${name}; S0² = 1\n# k,chi,chi of the first ${SHORT} frames\n${rows.join('\n')}\n`,
    );
  }
}
for (const [name, text] of demoFiles()) writeFileSync(new URL(`../${name}`, import.meta.url), text);
