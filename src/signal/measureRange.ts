import type { Spectrum } from '../spectrum/spectrum.js';
import type { FittedRegion } from './fitRegions.js';
import type { MeasuredSignal } from './measured.js';
import { plainIntegral } from './plainIntegral.js';
import type { Target } from './signalTargets.js';
import { sticksOf } from './tailsOf.js';

/**
 * Measures a signal that declares no lines (`m`) by a plain integral over its range, less the lines of other signals there.
 *
 * @param regions fits of the signals that do declare lines
 * @returns the signal; its verdict never says more than that something is there
 * @source  see `plainIntegral`
 */
export function measureRange(spectrum: Spectrum, target: Target, regions: readonly FittedRegion[]): MeasuredSignal {
  const { signal, species, key } = target;
  const [low, high] = signal.rangePpm ?? [signal.shiftPpm - signal.withinPpm, signal.shiftPpm + signal.withinPpm];
  const { area: whole, u: noiseU, count } = plainIntegral(spectrum, low, high);
  const inside = regions
    .flatMap(({ fit }) => sticksOf(fit))
    .filter((line) => line.shiftHz >= low * spectrum.observeMhz && line.shiftHz <= high * spectrum.observeMhz);
  const others = inside.reduce((sum, line) => sum + line.area, 0);
  const area = whole - others;
  // Lines of others are known to a few percent at best where nothing separates them.
  const u = Math.hypot(noiseU, 0.03 * others);
  const isPresent = area > 3 * u;
  const verdict = !isPresent ? 'absent' : inside.length > 0 ? 'crowded' : 'matches';
  const words = !isPresent
    ? 'multiplet absent'
    : inside.length > 0
      ? 'multiplet shares its range with other signals; measured by plain integral'
      : 'multiplet measured by plain integral; its lines are not declared';
  return {
    key,
    species: species.id,
    use: signal.use,
    nuclei: signal.nuclei,
    shiftPpm: centreOf(spectrum, low, high) ?? signal.shiftPpm,
    widthHz: count * spectrum.stepHz,
    area,
    u,
    ...(inside.length === 0 ? { integral: whole } : {}),
    verdict,
    declared: signal.pattern.text,
    ...(isPresent ? {} : { areaUpper95: Math.max(0, area) + 1.645 * u }),
    u0: noiseU,
    fittedWith: [],
    words,
  };
}

/** Centre of gravity of what stands above the noise. */
function centreOf(spectrum: Spectrum, low: number, high: number): number | undefined {
  const { real, firstPpm, stepPpm, noise } = spectrum;
  let sum = 0;
  let moment = 0;
  for (let i = Math.max(0, Math.ceil((firstPpm - high) / stepPpm)); i < real.length && firstPpm - i * stepPpm >= low; i += 1) {
    if (real[i]! < 4 * noise) continue;
    sum += real[i]!;
    moment += real[i]! * (firstPpm - i * stepPpm);
  }
  return sum > 0 ? moment / sum : undefined;
}
