import { strToU8, zipSync, type Zippable } from 'fflate';
import { existsSync, mkdtempSync, readdirSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { createStaging } from '../../electron/backend/staging/staging.ts';
import { crc32, unzip } from '../../electron/backend/staging/zip.ts';

const spectrum = strToU8(Array.from({ length: 50 }, (_, i) => `${2800 + i} ${(i % 7) / 10}`).join('\n'));
const pack = (files: Zippable): Uint8Array => zipSync(files);

/** Position of the k-th signature in an archive. */
function find(bytes: Uint8Array, signature: number, from = 0): number {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  for (let i = from; i + 4 <= bytes.length; i++) if (view.getUint32(i, true) === signature) return i;
  throw new Error('no such signature');
}
const localHeader = 0x04034b50;
const centralHeader = 0x02014b50;

function patched(
  bytes: Uint8Array,
  change: (view: DataView, local: number, central: number) => void,
): Uint8Array {
  const copy = bytes.slice();
  change(new DataView(copy.buffer), find(copy, localHeader), find(copy, centralHeader));
  return copy;
}

function reasonOf(bytes: Uint8Array): string {
  const outcome = unzip(bytes, 'drop.zip');
  expect(outcome.ok).toBe(false);
  return outcome.ok ? '' : outcome.reason;
}

describe('an archive', () => {
  it('that is sound is taken whole, folders and empty files included', () => {
    const files = { 'a/one.txt': spectrum, 'b/c/two.txt': spectrum, 'empty.txt': new Uint8Array(0) };
    const outcome = unzip(pack(files), 'drop.zip');
    expect(outcome.ok && outcome.files.map((f) => f.name).sort()).toEqual(Object.keys(files).sort());
    expect(outcome.ok && outcome.files.find((f) => f.name === 'a/one.txt')?.bytes).toEqual(spectrum);
  });

  it('stored without compression is taken whole too', () => {
    const outcome = unzip(zipSync({ 'one.txt': spectrum, 'two.txt': spectrum }, { level: 0 }), 'drop.zip');
    expect(outcome.ok && outcome.files.map((f) => f.bytes)).toEqual([spectrum, spectrum]);
  });

  it.each(['../out.txt', 'a/../../out.txt', '/etc/out.txt', 'C:/out.txt', 'a\\..\\out.txt'])(
    'with the entry “%s” is refused whole',
    (name) => {
      expect(reasonOf(pack({ 'good.txt': spectrum, [name]: spectrum }))).toMatch(
        /points outside the archive/,
      );
    },
  );

  it('within an archive is refused', () => {
    expect(reasonOf(pack({ 'inner.zip': pack({ 'one.txt': spectrum }) }))).toMatch(
      /archive within the archive/,
    );
  });

  it('that is encrypted is refused', () => {
    const bytes = patched(pack({ 'one.txt': spectrum }), (view, local, central) => {
      view.setUint16(local + 6, 1, true);
      view.setUint16(central + 8, 1, true);
    });
    expect(reasonOf(bytes)).toMatch(/encrypted/);
  });

  it('whose check sum, size or data do not agree is refused', () => {
    const sound = pack({ 'one.txt': spectrum });
    const wrongSum = patched(sound, (view, _, central) =>
      view.setUint32(central + 16, (crc32(spectrum) ^ 1) >>> 0, true),
    );
    expect(reasonOf(wrongSum)).toMatch(/check sum/);
    const tooSmall = patched(sound, (view, _, central) => view.setUint32(central + 24, 10, true));
    expect(reasonOf(tooSmall)).toMatch(/larger than its header says/);
    const tooLarge = patched(sound, (view, _, central) =>
      view.setUint32(central + 24, spectrum.length + 10, true),
    );
    expect(reasonOf(tooLarge)).toMatch(/check sum/);
    const broken = patched(sound, (view, local) => view.setUint32(local + 40, 0xffffffff, true));
    expect(reasonOf(broken)).toMatch(/damaged|check sum|could not be unpacked/);
  });

  it('that unpacks to far more than it is (a bomb) is refused before it is unpacked', () => {
    const zeros = new Uint8Array(8_000_000);
    const bomb = pack(Object.fromEntries(Array.from({ length: 3 }, (_, i) => [`${i}.txt`, zeros])));
    const honest = patched(bomb, (view, _, central) => view.setUint32(central + 24, 2_000_000_000, true));
    expect(reasonOf(honest)).toMatch(/too large/);
    const lying = patched(bomb, (view, _, central) => view.setUint32(central + 24, 1000, true));
    const start = performance.now();
    expect(reasonOf(lying)).toMatch(/larger than its header says/);
    expect(performance.now() - start).toBeLessThan(10_000);
  });

  it('with 100,000 entries is refused', () => {
    const empty = new Uint8Array(0);
    const many = zipSync(Object.fromEntries(Array.from({ length: 65_000 }, (_, i) => [`${i}.txt`, empty])), {
      level: 0,
    });
    expect(reasonOf(many)).toMatch(/more than 20000/);
  });

  it('cut at any place, or of random bytes, is refused without a crash', () => {
    const sound = pack({ 'one.txt': spectrum, 'two.txt': spectrum });
    for (let length = 0; length < sound.length; length += 7) reasonOf(sound.subarray(0, length));
    let seed = 1;
    for (let round = 0; round < 300; round++) {
      const copy = sound.slice();
      for (let k = 0; k < 4; k++) {
        seed = (seed * 48_271) % 2_147_483_647;
        copy[seed % copy.length] = seed & 255;
      }
      const outcome = unzip(copy, 'drop.zip');
      // What is taken in spite of a change is the same bytes: the change lay in dates or comments.
      if (outcome.ok) for (const f of outcome.files) expect(f.bytes).toEqual(spectrum);
      else expect(outcome.reason).toMatch(/^drop\.zip: .+\./);
    }
  });
});

describe('staging', () => {
  let folder: string;
  beforeEach(() => (folder = mkdtempSync(join(tmpdir(), 'rovimark-staging-'))));
  afterEach(() => rmSync(folder, { recursive: true, force: true }));

  it('writes nothing outside its folder, whatever a file is called', async () => {
    const staging = createStaging(join(folder, 'staging'));
    for (const name of ['../../out.txt', '/tmp/rovimark-out.txt', '..\\out.txt', 'con', 'a'.repeat(900)])
      await staging.putPart(1, name, 0, spectrum, true);
    await staging.putPart(1, 'drop.zip', 0, pack({ '../out.txt': spectrum }), true);
    expect(readdirSync(folder)).toEqual(['staging']);
    expect(existsSync('/tmp/rovimark-out.txt')).toBe(false);
    const [refused] = staging.list(1).filter((f) => f.name === 'drop.zip');
    expect(refused).toMatchObject({ became: 'left out' });
    staging.drop(1);
    expect(readdirSync(join(folder, 'staging'))).toEqual([]);
  });

  it('keeps what came in over a restart, refuses a part out of order, and sweeps what nobody owns', async () => {
    const place = join(folder, 'staging');
    const staging = createStaging(place);
    await staging.putPart(1, 'one.txt', 0, spectrum.subarray(0, 100), false);
    await staging.putPart(1, 'one.txt', 100, spectrum.subarray(100), true);
    await staging.putPart(2, 'two.txt', 0, spectrum, true);
    await expect(staging.putPart(1, 'three.txt', 50, spectrum, true)).rejects.toThrow(
      /part of the upload is missing/,
    );
    const again = createStaging(place);
    const [file] = again.list(1);
    expect(again.read(1, file!)).toEqual(spectrum);
    again.sweep([2]);
    expect(again.list(2)).toHaveLength(1);
    expect(readdirSync(place)).toEqual(['2']);
  });
});
