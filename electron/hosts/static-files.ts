import { createReadStream, realpathSync, statSync } from 'node:fs';
import type { ServerResponse } from 'node:http';
import { extname, join, sep } from 'node:path';

/** Nothing but the build's own files: no inline script, no other origin. */
export const contentSecurityPolicy =
  "default-src 'none'; script-src 'self'; style-src 'self'; style-src-attr 'unsafe-inline'; img-src 'self' data: blob:; font-src 'self'; connect-src 'self'; base-uri 'none'; form-action 'none'; frame-ancestors 'none'";

const types: Readonly<Record<string, string>> = {
  '.html': 'text/html; charset=utf-8',
  '.js': 'text/javascript; charset=utf-8',
  '.css': 'text/css; charset=utf-8',
  '.svg': 'image/svg+xml',
  '.png': 'image/png',
  '.woff2': 'font/woff2',
  '.json': 'application/json',
  '.map': 'application/json',
};

/** Path of a file inside a folder, links followed; null where it leads outside, is no file or is of no served kind. */
export function fileInside(folder: string, pathname: string): string | null {
  let decoded: string;
  try {
    decoded = decodeURIComponent(pathname === '/' ? '/index.html' : pathname);
  } catch {
    return null;
  }
  if (decoded.includes('\0') || decoded.includes('\\') || types[extname(decoded)] === undefined) return null;
  try {
    const root = realpathSync(folder);
    const path = realpathSync(join(root, decoded));
    return path.startsWith(root + sep) && statSync(path).isFile() ? path : null;
  } catch {
    return null;
  }
}

export function contentType(path: string): string {
  return types[extname(path)] ?? 'application/octet-stream';
}

export function serveFile(folder: string, pathname: string, response: ServerResponse): void {
  const path = fileInside(folder, pathname);
  if (path === null) {
    response.writeHead(404, { 'content-type': 'text/plain; charset=utf-8' });
    response.end('There is no such page.');
    return;
  }
  response.writeHead(200, { 'content-type': contentType(path) });
  createReadStream(path).pipe(response);
}
