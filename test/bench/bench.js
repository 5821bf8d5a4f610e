/**
 * Time per station and point, as ratios to one complex FFT of 131,072 points in the same run, and beside the script a
 * chemist would write instead (`yardstick.py`, when python3 with NumPy and SciPy is there). `npm run bench`.
 */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { performance } from 'node:perf_hooks';
import FFT from 'fft.js';
import { deriveAmounts } from '../../dist/amount/deriveAmounts.js';
import { decodeJcamp } from '../../dist/decode/decodeJcamp.js';
import { readMethod } from '../../dist/method/readMethod.js';
import { processTimePoint } from '../../dist/point/processTimePoint.js';
import { measureSignals } from '../../dist/signal/measureSignals.js';
import { makeSpectrum } from '../../dist/spectrum/makeSpectrum.js';
import { benchCase } from './benchCase.js';

const repeats = Number(process.env.KINETRAIL_BENCH_REPEATS ?? 7);

function medianMs(work) {
  work();
  const times = [];
  for (let k = 0; k < repeats; k += 1) {
    const start = performance.now();
    work();
    times.push(performance.now() - start);
  }
  return times.sort((a, b) => a - b)[Math.floor(times.length / 2)];
}

const take = (result) => {
  if (!result.ok) throw new Error(JSON.stringify(result.problem));
  return result.value;
};

const { methodText, fileText, fid } = benchCase();
const method = take(readMethod(methodText, 'bench.yaml'));
const bytes = new TextEncoder().encode(fileText);
const acquisition = take(take(decodeJcamp(bytes, 'bench.jdx'))[0]);
const spectrum = take(makeSpectrum(acquisition, method));
const measurement = measureSignals(spectrum, method);

const fft = new FFT(131_072);
const input = new Float64Array(262_144).map((_, index) => Math.sin(index));
const output = new Float64Array(262_144);
const fftMs = medianMs(() => fft.transform(output, input));

const rows = [
  ['complex FFT, 131,072 points', fftMs],
  ['decode (65,536-point complex FID, DIFDUP)', medianMs(() => decodeJcamp(bytes, 'bench.jdx'))],
  ['spectrum (onset to referenced, zero-filled to 131,072)', medianMs(() => makeSpectrum(acquisition, method))],
  [`signals (${measurement.signals.length} diagnostic signals)`, medianMs(() => measureSignals(spectrum, method))],
  ['amounts', medianMs(() => deriveAmounts(measurement, method, {}))],
  ['the whole time point, bytes to record', medianMs(() => processTimePoint(bytes, 'bench.jdx', method))],
];
const whole = rows.at(-1)[1];
const yardstick = yardstickMs(fid);
if (yardstick !== undefined) rows.push(['yardstick: the script a chemist would write (no decoding)', yardstick]);

console.log('station                                                        ms   in FFTs');
for (const [name, ms] of rows)
  console.log(`${name.padEnd(56)} ${ms.toFixed(1).padStart(8)} ${(ms / fftMs).toFixed(2).padStart(9)}`);
if (yardstick !== undefined) console.log(`\nwhole time point / yardstick: ${(whole / yardstick).toFixed(3)}`);

/** Runs the yardstick in the same minute on the same data. */
function yardstickMs({ real, imag, dwellS }) {
  const folder = mkdtempSync(join(tmpdir(), 'kinetrail-bench-'));
  try {
    const [realFile, imagFile] = [join(folder, 'real'), join(folder, 'imag')];
    writeFileSync(realFile, new Uint8Array(real.buffer));
    writeFileSync(imagFile, new Uint8Array(imag.buffer));
    for (const python of ['/usr/bin/python3', 'python3']) {
      const run = spawnSync(python, [join(import.meta.dirname, 'yardstick.py'), realFile, imagFile, String(dwellS), '3'], {
        encoding: 'utf8',
      });
      if (run.status === 0) return JSON.parse(run.stdout).total * 1000;
    }
    console.log('note: python3 with NumPy and SciPy not found; the yardstick was not run\n');
    return undefined;
  } finally {
    rmSync(folder, { recursive: true });
  }
}
