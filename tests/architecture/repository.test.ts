import { execFileSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';

const files = execFileSync('git', ['ls-files'], { encoding: 'utf8' }).trim().split('\n');
const texts = files
  .filter(
    (f) => /\.(ts|mjs|js|vue|css|html|json|md|sql|py|svg)$|^\.ci\//.test(f) && f !== 'package-lock.json',
  )
  .map((name) => ({ name, text: readFileSync(name, 'utf8') }));
const code = texts.filter((f) => /^(shared-core|electron|renderer)\/.*\.(ts|vue)$/.test(f.name));
interface Package {
  readonly dependencies: Record<string, string>;
  readonly devDependencies: Record<string, string>;
}

describe('the repository', () => {
  it('keeps its import rules', () => {
    const run = (): string =>
      execFileSync(
        process.execPath,
        [
          'node_modules/dependency-cruiser/bin/dependency-cruise.mjs', '--config', '.dependency-cruiser.mjs',
          'shared-core', 'electron', 'renderer',
        ], // prettier-ignore
        { encoding: 'utf8' },
      );
    expect(run()).toMatch(/no dependency violations found/);
  });

  it('names every package by one exact version', () => {
    const { dependencies, devDependencies } = JSON.parse(readFileSync('package.json', 'utf8')) as Package;
    const loose = Object.entries({ ...dependencies, ...devDependencies }).filter(
      ([, version]) => !/^\d+\.\d+\.\d+$/.test(version),
    );
    expect(loose).toEqual([]);
  });

  it('holds no path of a machine and no name of a registry', () => {
    // Written in parts, so that this test does not find itself.
    const forbidden = [
      ['/work', '/main'],
      ['/fa', 'rm/'],
      ['/ho', 'me/[a-z]+/'],
      ['registry\\.', 'npmjs'],
      ['npmjs', '\\.org'],
    ].map((parts) => parts.join(''));
    const found = texts.flatMap(({ name, text }) =>
      forbidden.filter((word) => new RegExp(word).test(text)).map((word) => `${name}: ${word}`),
    );
    expect(found).toEqual([]);
  });

  it('has a core without clock, randomness, surroundings and console', () => {
    const impure =
      /\bDate\.now|new Date\(|Math\.random|\bprocess\.|\bconsole\.|\bfetch\(|from 'node:|performance\.now/;
    const found = code
      .filter((f) => f.name.startsWith('shared-core/') && impure.test(f.text))
      .map((f) => f.name);
    expect(found).toEqual([]);
  });

  it('reaches no network: no address outside this computer in what ships', () => {
    const address = /https?:\/\/(?!127\.0\.0\.1|\$\{|www\.w3\.org\/2000\/svg)[^\s'"`]+/;
    const found = code
      .flatMap((f) => f.text.split('\n').map((line) => ({ name: f.name, line })))
      // A source beside a number is a comment, no request.
      .filter(({ line }) => address.test(line) && !/^\s*(\/\/|\*|\/\*)/.test(line))
      .map(({ name, line }) => `${name}: ${line.trim()}`);
    expect(found).toEqual([]);
  });

  it('writes TypeScript that can be stripped of its types', () => {
    const erasable =
      /^\s*(export )?(const )?enum \w|^\s*(export )?namespace \w|constructor\([^)]*\b(public|private|readonly) /m;
    expect(code.filter((f) => erasable.test(f.text)).map((f) => f.name)).toEqual([]);
  });

  it('keeps files small', () => {
    const large = code.filter((f) => f.text.split('\n').length > 401).map((f) => f.name);
    expect(large).toEqual([]);
  });
});
