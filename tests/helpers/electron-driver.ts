// Runs the built main and preload over the double and prints what they did, as one line of JSON.
import { createRequire, registerHooks } from 'node:module';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';

const double = new URL('./electron-double.ts', import.meta.url).href;
registerHooks({
  resolve: (specifier, context, next) =>
    specifier === 'electron' ? { url: double, shortCircuit: true } : next(specifier, context),
});
const { recorded } = (await import(double)) as typeof import('./electron-double.ts');
const built = process.argv[2]!;

interface Bridge {
  readonly call: (method: unknown, input: unknown) => Promise<unknown>;
  readonly onEvent: (listener: (event: unknown) => void) => () => void;
}

await import(pathToFileURL(join(built, 'main', 'main.js')).href);
for (
  let i = 0;
  i < 200 && recorded.windows.length === 0 && recorded.errorBoxes.length === 0 && !recorded.quit;
  i++
)
  await new Promise((resolve) => setTimeout(resolve, 50));
createRequire(import.meta.url)(join(built, 'preload', 'preload.cjs'));
const bridge = recorded.exposed['rovimark'] as Bridge | undefined;
const window = recorded.windows[0];

async function reach(url: string): Promise<{ status: number; policy: string | null }> {
  const response = await recorded.protocolHandler!(new Request(url));
  return { status: response.status, policy: response.headers.get('content-security-policy') };
}

function navigates(url: string): boolean {
  let prevented = false;
  const listener = window!.contentsEvents.get('will-navigate') as unknown as (event: unknown) => void;
  listener({ url, preventDefault: () => (prevented = true) });
  return !prevented;
}

const report: Record<string, unknown> = {
  exposed: Object.keys(recorded.exposed),
  bridge: bridge === undefined ? [] : Object.keys(bridge),
  channels: [...recorded.handlers.keys()],
  errorBoxes: recorded.errorBoxes,
  quit: recorded.quit,
  windows: recorded.windows.length,
};
if (window !== undefined && bridge !== undefined) {
  const events: unknown[] = [];
  const off = bridge.onEvent((event) => events.push(event));
  const made = await bridge.call('sections.create', { title: 'Over the bridge' });
  const listed = await bridge.call('sections.list', {});
  await bridge.call('sections.rename', {
    sectionId: (made as { value: { sectionId: number } }).value.sectionId,
    title: 'Renamed',
  });
  off();
  const hostile = [];
  for (const [method, input] of [
    ['nothing', {}],
    [null, null],
    ['sections.remove', { sectionId: 'x' }],
    ['sections.get', { sectionId: 99 }],
  ] as const)
    hostile.push(await bridge.call(method, input));
  const foreign = [];
  for (const url of [
    'https://attacker.example/',
    'app://other/',
    'app://rovimark.attacker.example/',
    'file:///etc/passwd',
    null,
  ]) {
    recorded.frameUrl = url;
    foreign.push(await bridge.call('sections.list', {}));
  }
  recorded.frameUrl = 'app://rovimark/index.html';
  let permission: boolean | null = null;
  window.permissionRequest!(null, 'geolocation', (allowed) => (permission = allowed));
  Object.assign(report, {
    preferences: window.options['webPreferences'],
    loaded: window.loaded,
    schemes: recorded.schemes,
    opens: window.openHandler!().action,
    permission,
    permissionCheck: window.permissionCheck!(),
    navigation: {
      own: navigates('app://rovimark/index.html'),
      foreign: navigates('https://attacker.example/'),
      lookalike: navigates('app://rovimark.attacker.example/'),
      file: navigates('file:///etc/passwd'),
    },
    pages: {
      own: await reach('app://rovimark/index.html'),
      climbing: await reach('app://rovimark/..%2f..%2fpackage.json'),
      foreign: await reach('app://other/index.html'),
    },
    made,
    listed,
    events,
    hostile,
    foreign,
  });
  (recorded.appEvents.get('window-all-closed') as (() => void) | undefined)?.();
  for (let i = 0; i < 100 && !recorded.quit; i++) await new Promise((resolve) => setTimeout(resolve, 20));
  report['quit'] = recorded.quit;
}
process.stdout.write(`\n${JSON.stringify(report)}\n`, () => process.exit(0));
