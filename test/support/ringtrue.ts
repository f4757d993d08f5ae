import { spawnSync } from 'node:child_process';
import { fileURLToPath } from 'node:url';

const ROOT = fileURLToPath(new URL('../../', import.meta.url));

export interface Ran {
  readonly code: number | null;
  readonly out: string;
  readonly err: string;
}

/** Run the built command in the project's root, as a user would. */
export function ringtrue(...args: string[]): Ran {
  const { status, stdout, stderr } = spawnSync(process.execPath, ['packages/cli/dist/ringtrue.js', ...args], {
    cwd: ROOT,
    encoding: 'utf8',
    maxBuffer: 64e6,
    env: { ...process.env, NO_COLOR: '1' },
  });
  return { code: status, out: stdout, err: stderr };
}
