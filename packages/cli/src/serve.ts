/** `ringtrue serve`: the web app from local files, on this machine only. */
import { readFileSync } from 'node:fs';
import { createServer, type ServerResponse } from 'node:http';
import { extname, join, normalize, sep } from 'node:path';
import { fileURLToPath } from 'node:url';
import { type Command, InvalidArgumentError } from 'commander';
import { runCommand, UsageError } from './command.js';

const APP = fileURLToPath(new URL('../../../apps/web/dist/', import.meta.url));

const TYPES: Readonly<Record<string, string>> = {
  '.html': 'text/html; charset=utf-8',
  '.js': 'text/javascript; charset=utf-8',
  '.css': 'text/css; charset=utf-8',
  '.svg': 'image/svg+xml',
  '.json': 'application/json',
  '.map': 'application/json',
  '.cif': 'text/plain; charset=utf-8',
  '.xyz': 'text/plain; charset=utf-8',
};

const POLICY =
  "default-src 'self'; style-src 'self' 'unsafe-inline'; img-src 'self' data: blob:; object-src 'none'; base-uri 'none'; frame-ancestors 'none'";

export function addServe(program: Command): void {
  program
    .command('serve')
    .summary('open the app in a browser on this machine')
    .description('Serve the app from local files on 127.0.0.1; nothing leaves the machine.')
    .option('--port <port>', 'port, 0 for any free one (default 4173)', port, 4173)
    .addHelpText('after', '\nExample:\n  ringtrue serve --port 8080')
    .action(({ port: wanted }: { port: number }) => runCommand(() => serve(wanted)));
}

function port(text: string): number {
  const value = Number(text);
  if (!(Number.isInteger(value) && value >= 0 && value <= 65535))
    throw new InvalidArgumentError('a whole number from 0 to 65535 is wanted.');
  return value;
}

function serve(wanted: number): Promise<void> {
  return new Promise((_, reject) => {
    const server = createServer(({ url, method }, response) => {
      if (method !== 'GET' && method !== 'HEAD') return answer(response, 405, 'text/plain', 'only GET');
      const path = fileOf(url ?? '/');
      if (path === undefined) return answer(response, 404, 'text/plain', 'no such file');
      try {
        answer(response, 200, TYPES[extname(path)] ?? 'application/octet-stream', readFileSync(path));
      } catch {
        answer(response, 404, 'text/plain', 'no such file');
      }
    });
    server.on('error', (error: NodeJS.ErrnoException) => {
      reject(
        error.code === 'EADDRINUSE' ? new UsageError(`port ${wanted} is in use; name another with --port, or 0 for any free one`) : error,
      );
    });
    server.listen(wanted, '127.0.0.1', () => {
      const address = server.address();
      const open = typeof address === 'object' && address ? address.port : wanted;
      process.stdout.write(`Ringtrue is open at http://127.0.0.1:${open}/ (Ctrl-C ends it)\n`);
    });
  });
}

/** Path inside the app's folder for a request, or none: nothing outside it is ever read. */
function fileOf(url: string): string | undefined {
  try {
    const name = decodeURIComponent(new URL(url, 'http://127.0.0.1').pathname);
    if (name.includes('\0')) return undefined;
    const path = normalize(join(APP, name.endsWith('/') ? `${name}index.html` : name));
    return path.startsWith(APP.endsWith(sep) ? APP : APP + sep) ? path : undefined;
  } catch {
    return undefined;
  }
}

function answer(response: ServerResponse, status: number, type: string, body: string | Buffer): void {
  response.writeHead(status, {
    'content-type': type,
    'content-security-policy': POLICY,
    'x-content-type-options': 'nosniff',
    'cache-control': 'no-cache',
  });
  response.end(body);
}
