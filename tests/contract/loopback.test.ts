import { mkdirSync, mkdtempSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { request, type IncomingHttpHeaders } from 'node:http';
import { connect, type Socket } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createBackend, type Backend } from '../../electron/backend/create-backend.ts';
import { startLoopback, type Loopback } from '../../electron/hosts/loopback.ts';

interface Reply {
  readonly status: number;
  readonly headers: IncomingHttpHeaders;
  readonly text: string;
}

const folder = mkdtempSync(join(tmpdir(), 'rovimark-loopback-'));
const web = join(folder, 'web');
let backend: Backend;
let host: Loopback;
let cookie = '';

/** A plain client that sends exactly what it is told, as an attacker would. */
function send(
  path: string,
  {
    method = 'GET',
    headers = {},
    body,
  }: { method?: string; headers?: Record<string, string>; body?: string } = {},
): Promise<Reply> {
  return new Promise((resolve, reject) => {
    const call = request(
      {
        host: '127.0.0.1',
        port: host.port,
        path,
        method,
        headers: { host: `127.0.0.1:${host.port}`, ...headers },
      },
      (response) => {
        let text = '';
        response.on('data', (part: Buffer) => (text += part.toString()));
        response.on('end', () =>
          resolve({ status: response.statusCode ?? 0, headers: response.headers, text }),
        );
        response.on('error', reject);
      },
    );
    call.on('error', reject);
    call.end(body);
  });
}

const json = { 'content-type': 'application/json' };
const ask = (headers: Record<string, string>, body = '{}', method = 'app.info'): Promise<Reply> =>
  send(`/api/${method}`, { method: 'POST', headers: { ...json, ...headers }, body });

async function stillAnswers(): Promise<void> {
  const reply = await ask({ cookie });
  expect(reply.status).toBe(200);
  expect(JSON.parse(reply.text)).toMatchObject({ ok: true });
}

beforeAll(async () => {
  mkdirSync(web);
  writeFileSync(join(web, 'index.html'), '<!doctype html><title>window</title>');
  writeFileSync(join(folder, 'secret.json'), '{"secret":true}');
  symlinkSync(join(folder, 'secret.json'), join(web, 'linked.json'));
  backend = await createBackend({
    storeFile: join(folder, 'store', 's.sqlite'),
    migrationsFolder: 'migrations',
    workers: 1,
  });
  host = await startLoopback({ backend, webFolder: web, bodyTimeoutMs: 400 });
});
afterAll(async () => {
  await host.close();
  await backend.close();
  rmSync(folder, { recursive: true, force: true });
});

describe('the app on 127.0.0.1', () => {
  it('lets nobody in without its token, or with a wrong one', async () => {
    expect((await send('/')).status).toBe(401);
    expect((await send('/index.html')).status).toBe(401);
    expect((await send('/events')).status).toBe(401);
    expect((await ask({})).status).toBe(401);
    expect((await ask({ cookie: 'rovimark=0000' })).status).toBe(401);
    expect((await send('/?token=0000')).status).toBe(401);
  });

  it('takes its token once, for a cookie that no script and no other site can use', async () => {
    const path = host.url.slice(host.url.indexOf('/?'));
    const first = await send(path);
    expect(first.status).toBe(303);
    const given = first.headers['set-cookie']![0]!;
    expect(given).toMatch(/HttpOnly/);
    expect(given).toMatch(/SameSite=Strict/);
    cookie = given.split(';')[0]!;
    expect((await send(path)).status).toBe(401);
    await stillAnswers();
  });

  it('refuses a foreign Host, as a name that was rebound to this computer brings it', async () => {
    for (const name of [
      'attacker.example',
      `attacker.example:${host.port}`,
      `localhost:${host.port}`,
      '127.0.0.1',
    ]) {
      expect((await ask({ cookie, host: name })).status).toBe(403);
    }
  });

  it('refuses a foreign Origin and the form of another page', async () => {
    expect((await ask({ cookie, origin: 'http://attacker.example' })).status).toBe(403);
    expect((await ask({ cookie, origin: 'null' })).status).toBe(403);
    for (const type of [
      'application/x-www-form-urlencoded',
      'text/plain',
      'multipart/form-data; boundary=x',
    ]) {
      const form = await ask({ cookie, 'content-type': type }, '{"title":"from a form"}', 'sections.create');
      expect(form.status).toBe(415);
    }
    const sections = await ask({ cookie }, '{}', 'sections.list');
    expect(JSON.parse(sections.text)).toEqual({ ok: true, value: [] });
  });

  it('serves nothing outside its build: no path that climbs, no link that leads out', async () => {
    for (const path of [
      '/../secret.json',
      '/..%2fsecret.json',
      '/%2e%2e/secret.json',
      '/..%5csecret.json',
      '//etc/passwd',
      '/etc/passwd',
      '/linked.json',
      '/%00.json',
      '/%',
      '/store/s.sqlite',
      '/../store/s.sqlite',
    ]) {
      // prettier-ignore
      const reply = await send(path, { headers: { cookie } });
      expect(reply.status, path).toBe(404);
      expect(reply.text).not.toContain('secret');
    }
    const page = await send('/', { headers: { cookie } });
    expect(page.status).toBe(200);
    expect(page.headers['content-security-policy']).toMatch(/default-src 'none'; script-src 'self'/);
    expect(page.headers['x-content-type-options']).toBe('nosniff');
  });

  it('cuts an oversized body and a slow one, and goes on answering', async () => {
    const huge = await ask({ cookie }, `{"title":"${'x'.repeat(5_000_000)}"}`, 'sections.create').catch(
      () => null,
    );
    expect([413, null]).toContain(huge?.status ?? null);
    const slow = connect(host.port, '127.0.0.1');
    const answer = new Promise<string>((resolve) => {
      let text = '';
      slow.on('data', (part: Buffer) => (text += part.toString()));
      slow.on('close', () => resolve(text));
      slow.on('error', () => resolve(text));
    });
    slow.write(
      `POST /api/sections.create HTTP/1.1\r\nHost: 127.0.0.1:${host.port}\r\nCookie: ${cookie}\r\nContent-Type: application/json\r\nContent-Length: 1000\r\n\r\n{`,
    );
    expect(await answer).toMatch(/^HTTP\/1\.1 413/);
    await stillAnswers();
  });

  it('answers broken JSON, unknown calls and unknown verbs with a refusal', async () => {
    expect((await ask({ cookie }, '{')).status).toBe(400);
    for (const method of ['nothing', '__proto__', 'constructor', '../app.info', '%00']) {
      const reply = await ask({ cookie }, '{}', method);
      if (reply.status === 200)
        expect(JSON.parse(reply.text)).toMatchObject({ ok: false, error: { code: 'unknown-method' } });
    }
    expect((await send('/', { method: 'DELETE', headers: { cookie } })).status).toBe(405);
  });

  it('survives a flood of connections', async () => {
    const sockets = await Promise.all(
      Array.from(
        { length: 300 },
        () =>
          new Promise<Socket>((resolve) => {
            const socket = connect(host.port, '127.0.0.1', () => resolve(socket));
            socket.on('error', () => resolve(socket));
          }),
      ),
    );
    for (const socket of sockets) socket.destroy();
    await new Promise((resolve) => setTimeout(resolve, 100));
    await stillAnswers();
  });

  it('closes after idle time, when no window is connected', async () => {
    let other: Loopback | null = null;
    const closed = await new Promise<string>((resolve, reject) => {
      startLoopback({ backend, webFolder: web, idleMs: 50, onIdle: () => resolve('idle') }).then(
        (started) => (other = started),
        reject,
      );
    });
    await (other as Loopback | null)?.close();
    expect(closed).toBe('idle');
  });
});
