/**
 * `npm run bench -- [name…] [--frames N] [--show] [--out FILE]`: accuracy, honesty and speed of the engine on simulated
 * frames, family by family, against the Cramér–Rao bound; then ideal frames, refusals, and time and memory. Names choose
 * families and hopeless frames, and the sections `ideal`, `files` and `speed`. Exits 1 when a target is missed; `--show`
 * names every frame that is more than 4 u off.
 */
import { mkdir, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { benchFamilies } from './bench/families';
import { benchIdeal } from './bench/ideal';
import { benchRefusals } from './bench/refusals';
import type { Section } from './bench/section';
import { benchSpeed } from './bench/speed';
import { FAMILIES } from './simulator/families';
import { HOPELESS } from './simulator/hopeless';

const HOPELESS_FRAMES = 30;

async function main(argv: string[]): Promise<number> {
  const option = (name: string): string | undefined =>
    argv.includes(name) ? argv[argv.indexOf(name) + 1] : undefined;
  const frames = option('--frames') ? Number(option('--frames')) : null;
  const out = option('--out');
  const names = argv.filter(
    (a, i) => !a.startsWith('--') && argv[i - 1] !== '--frames' && argv[i - 1] !== '--out',
  );
  const chosen = (name: string): boolean => names.length === 0 || names.some((n) => name.includes(n));
  const families = FAMILIES.filter((f) => chosen(f.name));
  const hopeless = HOPELESS.filter((f) => chosen(f.name));

  const sections: Section[] = [];
  if (families.length > 0) sections.push(await benchFamilies(families, frames, argv.includes('--show')));
  if (chosen('ideal')) sections.push(await benchIdeal());
  if (hopeless.length > 0 || chosen('files')) {
    const most = Math.min(frames ?? HOPELESS_FRAMES, HOPELESS_FRAMES);
    sections.push(await benchRefusals(hopeless, most, chosen('files')));
  }
  if (chosen('speed')) sections.push(await benchSpeed());
  if (sections.length === 0) throw new Error(`Nothing is called ${names.join(' or ')}.`);

  if (out) {
    await mkdir(path.dirname(out), { recursive: true });
    await writeFile(out, `${sections.map((s) => s.lines.join('\n')).join('\n\n')}\n`);
  }
  const missed = sections.reduce((n, s) => n + s.missed, 0);
  console.log(missed === 0 ? 'All targets met.' : `${missed} targets missed.`);
  return missed === 0 ? 0 : 1;
}

main(process.argv.slice(2)).then(
  (code) => {
    process.exitCode = code;
  },
  (error: unknown) => {
    console.error(error);
    process.exitCode = 2;
  },
);
