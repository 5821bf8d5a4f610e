import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { invariant } from '../base/result.js';
import { readMethod } from '../method/readMethod.js';
import { type NightPoint, simulateNight } from './nightRun.js';
import { writeJcamp } from './writeJcamp.js';

const seed = 2207;
/** Index of the time point whose copy to the share broke off. */
const halfWritten = 19;

/** Writes the sample night into `sample-runs`: one file a time point, one of them cut off, and the truth beside. */
function writeNight(folder: string): void {
  const methodFile = join(folder, 'methods', 'phenylethyl-acetate.yaml');
  const method = readMethod(readFileSync(methodFile, 'utf8'), methodFile);
  invariant(method.ok, 'the sample method must be valid');
  const points = simulateNight(method.value, seed);
  points.forEach((point, index) => {
    const text = asJcamp(point);
    const kept = index === halfWritten ? text.slice(0, Math.floor(text.length * 0.6)) : text;
    writeFileSync(join(folder, 'PE-2207', point.name), kept);
  });
  writeFileSync(join(folder, 'truth', 'PE-2207.csv'), truthTable(points));
}

function asJcamp(point: NightPoint): string {
  const { name, real, imag, dwellS, observeMhz, acquired } = point;
  const title = `PE-2207 ${name.replace('.jdx', '')}`;
  // 2^17 levels keep the rounding noise far below the noise of the receiver, and the files small.
  return writeJcamp(
    { kind: 'fid', title, nucleus: '1H', observeMhz, real, imag, dwellS, longDate: acquired, solvent: 'CDCl3', scans: 8 },
    { integerMax: 2 ** 17 },
  );
}

function truthTable(points: readonly NightPoint[]): string {
  const rows = points.map(({ name, acquired, elapsedS, conversion, impurityShare }) =>
    [name, acquired, elapsedS, conversion.toPrecision(8), impurityShare.toPrecision(6)].join(','),
  );
  return `${['file,acquired,elapsed_s,conversion,olefin_per_starting_material', ...rows].join('\n')}\n`;
}

writeNight(process.argv[2] ?? 'sample-runs');
