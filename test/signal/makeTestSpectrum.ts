import FFT from 'fft.js';
import { makeRandom } from '../../src/simulate/random.js';
import { type FidLine, type FidSettings, synthesizeFid } from '../../src/simulate/synthesizeFid.js';
import type { Spectrum } from '../../src/spectrum/spectrum.js';

export interface TestSpectrumSettings {
  readonly observeMhz?: number;
  readonly carrierPpm?: number;
  readonly spectralWidthHz?: number;
  readonly points?: number;
  readonly phaseDeg?: number;
  /** rms noise of a spectrum point in units of area / Hz; see `noiseFor`. */
  readonly noise?: number;
  readonly seed?: number;
  readonly zeroFilling?: number;
  readonly lineBroadeningHz?: number;
  readonly referenceWidthHz?: number;
}

/**
 * A spectrum of known truth by the plainest way: FID, first point halved, window, zero filling, transform. No phase search, no
 * baseline: what this station sees when the stations before it did their work.
 */
export function makeTestSpectrum(lines: readonly FidLine[], settings: TestSpectrumSettings = {}): Spectrum {
  const { observeMhz = 400, carrierPpm = 5, spectralWidthHz = 6400, points = 16_384, zeroFilling = 2 } = settings;
  const broadening = settings.lineBroadeningHz ?? 0;
  const dwellS = 1 / spectralWidthHz;
  const weights = Float64Array.from({ length: points }, (_, k) => Math.exp(-Math.PI * broadening * k * dwellS));
  const power = weights.reduce((sum, w) => sum + w * w, 0);
  // A real spectrum point is dwell x sum over points of the real part: its noise is dwell x sigma x sqrt(sum w^2).
  const fidNoise = (settings.noise ?? 0) / (dwellS * Math.sqrt(power));
  const fid: FidSettings = { observeMhz, carrierPpm, spectralWidthHz, points, phaseDeg: settings.phaseDeg ?? 0, noise: fidNoise };
  const { real, imag } = synthesizeFid(lines, fid, makeRandom(settings.seed ?? 1));
  const size = points * zeroFilling;
  const input = new Float64Array(2 * size);
  for (let k = 0; k < points; k += 1) {
    const weight = weights[k]! * (k === 0 ? 0.5 : 1) * dwellS;
    input[2 * k] = real[k]! * weight;
    input[2 * k + 1] = imag[k]! * weight;
  }
  const fft = new FFT(size);
  const output = new Float64Array(2 * size);
  fft.transform(output, input);
  const stepHz = spectralWidthHz / size;
  // One-sided decay: the transform is L/2 in these units, so it is doubled to give unit area.
  const realOut = new Float64Array(size);
  const imagOut = new Float64Array(size);
  for (let i = 0; i < size; i += 1) {
    const bin = (size / 2 - 1 - i + size) % size;
    realOut[i] = 2 * output[2 * bin]!;
    imagOut[i] = 2 * output[2 * bin + 1]!;
  }
  const correlation = Float64Array.from({ length: broadening > 0 ? 160 : 1 }, (_, lag) => {
    let sum = 0;
    for (let k = 0; k < points; k += 1) sum += weights[k]! ** 2 * Math.cos((2 * Math.PI * lag * k) / size);
    return sum / power;
  });
  const reference = { used: 'tetramethylsilane', shiftPpm: 0, movedPpm: 0 };
  return {
    nucleus: '1H',
    observeMhz,
    real: realOut,
    imag: imagOut,
    firstPpm: carrierPpm + ((size / 2 - 1) * stepHz) / observeMhz,
    stepPpm: stepHz / observeMhz,
    stepHz,
    noise: 2 * (settings.noise ?? 1e-9),
    noiseCorrelation: correlation,
    baselineU: 0.06 * (settings.noise ?? 1e-9),
    acquisitionS: points * dwellS,
    reference: settings.referenceWidthHz === undefined ? reference : { ...reference, widthHz: settings.referenceWidthHz },
    quality: { phaseDeg: [0, 0] },
    steps: [],
    flags: [],
  };
}
