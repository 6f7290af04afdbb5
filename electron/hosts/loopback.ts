import { randomBytes, timingSafeEqual } from 'node:crypto';
import { createServer, type IncomingMessage, type Server, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import type { Backend } from '../backend/create-backend.ts';
import { contentSecurityPolicy, serveFile } from './static-files.ts';

export interface LoopbackOptions {
  readonly backend: Backend;
  /** Folder of the built window; nothing outside it is served. */
  readonly webFolder: string;
  /** 0: a free one. */
  readonly port?: number;
  /** Called when no window has been connected for this long; 0: never. */
  readonly idleMs?: number;
  /** A request whose body takes longer is cut. */
  readonly bodyTimeoutMs?: number;
  readonly onIdle?: () => void;
}

export interface Loopback {
  /** Address with the one-time token, to open once. */
  readonly url: string;
  readonly port: number;
  readonly close: () => Promise<void>;
}

const mostBodyBytes = 4_000_000;
const usualBodyTimeoutMs = 20_000;
const mostConnections = 64;
const cookieName = 'rovimark';

/** The app on 127.0.0.1: a one-time token becomes a cookie; Host and Origin are checked; sizes and times are bounded. */
export async function startLoopback(options: LoopbackOptions): Promise<Loopback> {
  const session = randomBytes(32).toString('hex');
  let token: string | null = randomBytes(32).toString('hex');
  const streams = new Set<ServerResponse>();
  let port = 0;
  const unsubscribe = options.backend.subscribe((event) => {
    for (const stream of streams) stream.write(`data: ${JSON.stringify(event)}\n\n`);
  });

  async function answer(request: IncomingMessage, response: ServerResponse): Promise<void> {
    secure(response);
    const own = `127.0.0.1:${port}`;
    // A foreign name that resolves to this machine (DNS rebinding) shows in Host, a foreign page in Origin.
    if (request.headers.host !== own) {
      refuse(response, 403, 'This address is not served.');
      return;
    }
    const { origin } = request.headers;
    if (origin !== undefined && origin !== `http://${own}`) {
      refuse(response, 403, 'Requests from other pages are refused.');
      return;
    }
    const url = new URL(request.url ?? '/', `http://${own}`);
    if (request.method === 'GET' && url.pathname === '/' && url.searchParams.has('token')) {
      openWith(url.searchParams.get('token')!, response);
      return;
    }
    if (!hasSession(request, session)) {
      refuse(response, 401, 'Open the address that Rovimark printed when it started.');
      return;
    }
    if (request.method === 'POST' && url.pathname.startsWith('/api/'))
      return call(request, response, url.pathname.slice(5));
    if (request.method === 'GET' && url.pathname === '/events') {
      listen(response);
      return;
    }
    if (request.method === 'GET' || request.method === 'HEAD') {
      serveFile(options.webFolder, url.pathname, response);
      return;
    }
    refuse(response, 405, 'This is not supported.');
  }

  function openWith(given: string, response: ServerResponse): void {
    if (token === null || !equal(given, token))
      return refuse(response, 401, 'This address was used already or is wrong; start Rovimark anew.');
    token = null;
    response.writeHead(303, {
      location: '/',
      'set-cookie': `${cookieName}=${session}; HttpOnly; SameSite=Strict; Path=/`,
    });
    response.end();
  }

  async function call(request: IncomingMessage, response: ServerResponse, method: string): Promise<void> {
    // A form of another page cannot send JSON without asking first.
    if (request.headers['content-type'] !== 'application/json') {
      refuse(response, 415, 'Calls are JSON.');
      return;
    }
    const body = await readBody(request, options.bodyTimeoutMs ?? usualBodyTimeoutMs);
    if (body === null) {
      refuse(response, 413, 'The request is too large or too slow.');
      return;
    }
    let input: unknown;
    try {
      input = JSON.parse(body);
    } catch {
      refuse(response, 400, 'The request is no JSON.');
      return;
    }
    const reply = await options.backend.dispatch(method, input);
    response.writeHead(200, { 'content-type': 'application/json' });
    response.end(JSON.stringify(reply));
  }

  let idle: NodeJS.Timeout | null = null;
  function watchIdle(): void {
    if (idle !== null) clearTimeout(idle);
    idle = null;
    if (streams.size === 0 && (options.idleMs ?? 0) > 0)
      idle = setTimeout(() => options.onIdle?.(), options.idleMs);
  }
  function listen(response: ServerResponse): void {
    response.writeHead(200, { 'content-type': 'text/event-stream', 'cache-control': 'no-store' });
    response.write(': open\n\n');
    streams.add(response);
    watchIdle();
    response.on('close', () => {
      streams.delete(response);
      watchIdle();
    });
  }

  const server = createServer((request, response) => {
    answer(request, response).catch(() => refuse(response, 500, 'Something went wrong.'));
  });
  server.maxConnections = mostConnections;
  server.requestTimeout = 30_000;
  server.headersTimeout = 10_000;
  port = await listening(server, options.port ?? 0);
  watchIdle();
  return {
    url: `http://127.0.0.1:${port}/?token=${token}`,
    port,
    close: () =>
      new Promise((resolve) => {
        unsubscribe();
        if (idle !== null) clearTimeout(idle);
        for (const stream of streams) stream.end();
        server.close(() => resolve());
        server.closeAllConnections();
      }),
  };
}

function listening(server: Server, port: number): Promise<number> {
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(port, '127.0.0.1', () => resolve((server.address() as AddressInfo).port));
  });
}

function readBody(request: IncomingMessage, timeoutMs: number): Promise<string | null> {
  return new Promise((resolve) => {
    const parts: Buffer[] = [];
    let size = 0;
    const timer = setTimeout(() => end(null), timeoutMs);
    const end = (body: string | null): void => {
      clearTimeout(timer);
      resolve(body);
    };
    request.on('data', (part: Buffer) => {
      size += part.length;
      if (size <= mostBodyBytes) parts.push(part);
      else end(null);
    });
    request.on('end', () => end(Buffer.concat(parts).toString('utf8')));
    request.on('error', () => end(null));
  });
}

function hasSession(request: IncomingMessage, session: string): boolean {
  const cookies = (request.headers.cookie ?? '').split(';').map((c) => c.trim());
  const own = cookies.find((c) => c.startsWith(`${cookieName}=`));
  return own !== undefined && equal(own.slice(cookieName.length + 1), session);
}

function equal(a: string, b: string): boolean {
  const [x, y] = [Buffer.from(a), Buffer.from(b)];
  return x.length === y.length && timingSafeEqual(x, y);
}

function secure(response: ServerResponse): void {
  response.setHeader('content-security-policy', contentSecurityPolicy);
  response.setHeader('x-content-type-options', 'nosniff');
  response.setHeader('referrer-policy', 'no-referrer');
  response.setHeader('cross-origin-resource-policy', 'same-origin');
  response.setHeader('cache-control', 'no-store');
}

function refuse(response: ServerResponse, status: number, sentence: string): void {
  if (response.headersSent) return void response.end();
  response.writeHead(status, { 'content-type': 'text/plain; charset=utf-8', connection: 'close' });
  response.end(sentence);
}
