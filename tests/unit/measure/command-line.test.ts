/** The command as a person calls it: one JSON line per frame on stdout, nothing else, and the exit codes. */
import { execFile } from 'node:child_process';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import os from 'node:os';
import path from 'node:path';
import { PLAIN_SCENE } from '@/scripts/simulator/scene';
import { scanText } from '@/scripts/simulator/scan';
import { frame, tiff16 } from './helpers/frames';

/** Starting Node a few times takes seconds on a busy machine. */
jest.setTimeout(60_000);

const ROOT = path.resolve(__dirname, '../../..');

function run(args: string[]): Promise<{ code: number; out: string; err: string }> {
  return new Promise((resolve) => {
    execFile(
      process.execPath,
      [path.join(ROOT, 'scripts', 'analyse.mjs'), ...args],
      { cwd: ROOT },
      (error, out, err) => {
        resolve({ code: error ? Number(error.code ?? 1) : 0, out, err });
      },
    );
  });
}

describe('npm run analyse', () => {
  let folder = '';
  let good = '';
  beforeAll(async () => {
    folder = await mkdtemp(path.join(os.tmpdir(), 'analyse-'));
    good = path.join(folder, 'good.tiff');
    await writeFile(good, await tiff16(frame({})));
    await writeFile(path.join(folder, 'not.tiff'), 'no picture');
  });
  afterAll(() => rm(folder, { recursive: true, force: true }));

  it('answers every frame on a line of its own', async () => {
    const list = path.join(folder, 'list.jsonl');
    await writeFile(
      list,
      `${JSON.stringify({ file: good, scaleUmPerPx: 24, separationUm: 250, distanceMm: 500, uScaleUmPerPx: 0.001, uSeparationUm: 0.1, uDistanceMm: 0.2 })}\n`,
    );
    const { code, out } = await run([
      good,
      path.join(folder, 'not.tiff'),
      path.join(folder, 'missing.tiff'),
      '--list',
      list,
    ]);
    expect(code).toBe(0);
    const lines = out
      .trimEnd()
      .split('\n')
      .map((l) => JSON.parse(l) as Record<string, unknown>);
    expect(lines.map((l) => l.ok)).toEqual([true, false, false, true]);
    expect(Object.keys(lines[0]).slice(0, 13)).toEqual([
      'file',
      'ok',
      'code',
      'message',
      'spacingPx',
      'uSpacingPx',
      'dofSpacing',
      'tiltDeg',
      'visibility',
      'zeroOrder',
      'orders',
      'region',
      'medium',
    ]);
    expect(lines[0]).not.toHaveProperty('wavelengthNm');
    expect(lines[1]).toMatchObject({ code: 'NOT_A_PICTURE' });
    expect(lines[2]).toMatchObject({ code: 'NO_SUCH_FILE' });
    for (const key of ['wavelengthNm', 'wavelengthVacuumNm', 'uWavelengthNm', 'expandedNm', 'k'])
      expect(typeof lines[3][key]).toBe('number');
    expect(Object.keys(lines[3].ms as object)).toEqual(['decode', 'find', 'profile', 'fit', 'total']);
    const orders = lines[0].orders as Record<string, unknown>[];
    expect(Object.keys(orders[0])).toEqual(['m', 'kind', 'xPx', 'yPx', 'uPx', 'pullPx']);
    expect(lines[0]).not.toHaveProperty('curves');
    expect(out).not.toMatch(/NaN|Infinity/);
  });

  it('measures a scan with the same keys, mm in place of px', async () => {
    const scan = path.join(folder, 'scan.csv');
    const words = path.join(folder, 'words.csv');
    const plan = {
      fromMm: -6,
      toMm: 6,
      stepMm: 0.05,
      zeroMm: 0,
      detectorMm: 0.4,
      peakCounts: 9000,
      dark: 90,
    };
    await writeFile(scan, scanText({ ...plan, scene: PLAIN_SCENE, seed: 5 }));
    await writeFile(words, 'no scan');
    const geometry = ['--separation-um', '250', '--distance-mm', '500', '--u-separation-um', '0.1'];
    const { code, out } = await run([
      ...['--scan', scan, '--scan', words, '--detector-mm', '0.4', '--u-distance-mm', '0.2'],
      ...geometry,
    ]);
    expect(code).toBe(0);
    const [good, bad] = out
      .trimEnd()
      .split('\n')
      .map((l) => JSON.parse(l) as Record<string, unknown>);
    const first =
      'file ok code message spacingMm uSpacingMm dofSpacing visibility zeroOrder orders region medium';
    expect(Object.keys(good).slice(0, 12)).toEqual(first.split(' '));
    expect(Object.keys((good.orders as object[])[0])).toEqual(['m', 'kind', 'xMm', 'uMm', 'pullMm']);
    // lambda L / d = 635 nm x 500 mm / 250 um
    expect(Math.abs((good.spacingMm as number) - 1.27)).toBeLessThan(5 * (good.uSpacingMm as number));
    expect(Math.abs((good.wavelengthNm as number) - 635)).toBeLessThan(good.expandedNm as number);
    expect(good).not.toHaveProperty('curves');
    expect(bad).toMatchObject({ ok: false, code: 'BROKEN_FILE', fileAtFault: true, scan: null });
    expect(out).not.toMatch(/NaN|Infinity/);
  });

  it.each([
    [[]],
    [['--bogus', 'x']],
    [['a.png', '--scale-um-per-px', 'zero']],
    [['a.png', '--linear', '--srgb']],
    [['--list', '/nowhere.jsonl']],
    [['--scan']],
    [['--scan', 'a.csv', '--detector-mm', '-1']],
  ])('wrong usage %j ends with 2 and says how', async (args) => {
    const { code, out, err } = await run(args);
    expect(code).toBe(2);
    expect(out).toBe('');
    expect(err).toMatch(/Usage/);
  });
});
