import type { Random } from './random.js';
import type { FidLine } from './synthesizeFid.js';

/** A hump of a few very broad signals, hundreds of hertz wide and more. */
export function drawHump(random: Random, observeMhz: number): FidLine[] {
  const area = random.between(0.5, 4);
  return [0, 1, 2].map(() => ({
    shiftPpm: random.between(2, 8),
    area: area * random.between(0.3, 1),
    widthHz: random.between(1.5, 4) * observeMhz,
  }));
}

/** Falsifies the first points by up to a third of the first one. */
export function corrupt({ real, imag }: { real: Float64Array; imag: Float64Array }, count: number, random: Random): void {
  const size = Math.hypot(real[0]!, imag[0]!);
  for (let k = 0; k < count; k += 1) {
    const fall = Math.exp(-k / 1.5) / 3;
    real[k] = real[k]! + size * fall * random.between(-1, 1);
    imag[k] = imag[k]! + size * fall * random.between(-1, 1);
  }
}
