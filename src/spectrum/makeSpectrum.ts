import type { Flag } from '../base/flag.js';
import { fail, ok, type Problem, type Result } from '../base/result.js';
import type { Acquisition } from '../decode/acquisition.js';
import type { Method } from '../method/method.js';
import { chooseReference } from './chooseReference.js';
import { completeStart } from './completeStart.js';
import { complexFrom, type Raw } from './complexFrom.js';
import { expectationsOf } from './expectations.js';
import { findLines } from './findLines.js';
import { flattenBaseline } from './flattenBaseline.js';
import { lineTails } from './lineTails.js';
import { measuredNoiseCorrelation } from './noiseCorrelationOf.js';
import { phaseSpectrum } from './phaseSpectrum.js';
import { type AxisHintPlace, type AxisPlace, placeAxis } from './placeAxis.js';
import { qualityFlags } from './qualityFlags.js';
import type { Spectrum, StepRecord } from './spectrum.js';

const pointCountMin = 256;

/**
 * From an acquisition to a phased, flat, referenced spectrum: the steps in their order.
 *
 * @param acquisition as decoded
 * @param method      what to expect, and how to process
 * @returns index 0 at the highest shift; area is sum of real x stepHz
 * @errors  nucleus-differs, observe-frequency-missing, too-few-points, no-signal, axis-not-found
 * @source  each step names its own
 */
export function makeSpectrum(acquisition: Acquisition, method: Method): Result<Spectrum> {
  const unfit = requireFit(acquisition, method);
  if (unfit) return fail(unfit);
  const observeMhz = acquisition.observeMhz!;

  const raw = complexFrom(acquisition, method.processing, method.input.onsetPoints);
  const found = findLines(raw, slopeRange(raw));
  const { peaks } = found;
  if (peaks.length === 0)
    return fail(problem('no-signal', 'no line stands out of the noise by a factor of 8', 'Check tube, shim, lock and receiver.'));

  const phased = phaseSpectrum({ ...raw, spectrum: completeStart(raw, found.fit.firstRad) }, found, method.processing.phase);
  const isFlat = method.processing.baseline === 'none';
  const flat = flattenBaseline(phased.spectrum.real, lineTails(raw, found), isFlat, raw.independentPoints);

  const expectations = expectationsOf(method, observeMhz);
  const place = placeAxis(raw.analysis, observeMhz, peaks, expectations, hintOf(acquisition, method));
  const lost = requirePlace(place);
  if (lost) return fail(lost);

  const real = place.isRising ? flat.real.slice().reverse() : flat.real;
  const imag = orientImag(phased.spectrum.imag, place.isRising);
  const axis = orientAxis(place, raw.spectrum.stepHz / observeMhz, real.length, observeMhz);
  const { pinned, flags: referenceFlags } = chooseReference(real, axis, flat.noise, method, expectations);
  const movedPpm = pinned ? pinned.shiftPpm - pinned.foundPpm : 0;

  const steps: StepRecord[] = [
    ...raw.steps,
    phased.step,
    {
      step: 'baseline',
      parameters: { how: method.processing.baseline, bends: flat.bends, masked_share: flat.maskedShare, noise: flat.noise },
    },
    {
      step: 'axis',
      parameters: { centre_ppm: place.centrePpm, rising: place.isRising, score: place.score, runner_up: place.runnerUp },
    },
    { step: 'reference', parameters: { on: pinned?.name ?? 'none', moved_ppm: movedPpm } },
  ];
  const spectrum: Omit<Spectrum, 'flags'> = {
    nucleus: method.nucleus,
    observeMhz,
    real,
    imag,
    firstPpm: axis.firstPpm + movedPpm,
    stepPpm: axis.stepPpm,
    stepHz: raw.spectrum.stepHz,
    noise: flat.noise,
    noiseCorrelation: raw.noiseCorrelation ?? measuredNoiseCorrelation(flat.real, flat.masked),
    baselineU: flat.baselineU,
    ...(raw.acquisitionS !== undefined ? { acquisitionS: raw.acquisitionS } : {}),
    reference: {
      used: pinned?.name ?? 'none',
      shiftPpm: pinned?.shiftPpm ?? 0,
      movedPpm,
      ...(pinned ? { widthHz: pinned.widthHz } : {}),
    },
    quality: {
      phaseDeg: phased.phaseDeg,
      ...(raw.onsetPoints !== undefined ? { onsetPoints: raw.onsetPoints - phased.phaseDeg[1] / 360 } : {}),
      ...(pinned ? { referenceWidthHz: pinned.widthHz } : {}),
      ...(pinned?.asymmetry !== undefined ? { referenceAsymmetry: pinned.asymmetry } : {}),
    },
    steps,
  };
  const flags: Flag[] = [
    ...placeFlags(place),
    ...phased.flags,
    ...referenceFlags,
    ...qualityFlags(acquisition, spectrum, flat.maskedShare, method),
  ];
  return ok({ ...spectrum, flags });
}

/** Time zero lies at a point before or after where the transform took it: one turn from end to end for each point. */
function slopeRange({ onsetPoints = 0, originRange = [-4, 4] }: Raw): readonly [number, number] {
  const [low, high] = originRange;
  return [2 * Math.PI * (onsetPoints - high), 2 * Math.PI * (onsetPoints - low)];
}

function problem(code: string, message: string, hint?: string): Problem {
  return { code, area: 'spectrum', message, retry: 'never', ...(hint ? { hint } : {}) };
}

/** What cannot be processed under this method at all. */
function requireFit(acquisition: Acquisition, method: Method): Problem | undefined {
  const { nucleus, observeMhz, real } = acquisition;
  if (nucleus !== undefined && nucleus !== method.nucleus)
    return problem('nucleus-differs', `the file holds ${nucleus}; the method follows ${method.nucleus}`);
  if (!(observeMhz !== undefined && observeMhz > 0))
    return problem('observe-frequency-missing', 'the file states no observe frequency, so Hz cannot become ppm');
  if (real.length < pointCountMin)
    return problem('too-few-points', `${real.length} points; at least ${pointCountMin} are needed`);
  return undefined;
}

/** A header is believed within 13 ppm; what the site states for its own files, within 0.3. */
function hintOf(acquisition: Acquisition, method: Method): AxisHintPlace | undefined {
  const { axis } = acquisition;
  if (!axis || acquisition.kind === 'fid')
    return method.input.carrierPpm !== undefined ? { centrePpm: method.input.carrierPpm, reachPpm: 0.3 } : undefined;
  // Index n/2 of the spectrum, which runs from low to high frequency.
  const stepPpm = Math.abs(axis.lastPpm - axis.firstPpm) / (acquisition.real.length - 1);
  const lowest = Math.min(axis.firstPpm, axis.lastPpm);
  return { centrePpm: lowest + (acquisition.real.length / 2) * stepPpm, isRising: true, reachPpm: 13 };
}

function requirePlace(place: AxisPlace): Problem | undefined {
  if (place.score >= 0.3) return undefined;
  const message = `the lines of the spectrum cannot be laid over what method and solvent lead to expect (agreement ${(100 * place.score).toFixed(0)} %)`;
  return problem('axis-not-found', message, 'Check that this file belongs to this method.');
}

function placeFlags(place: AxisPlace): Flag[] {
  if (place.runnerUp < 0.92 * place.score) return [];
  return [
    {
      code: 'axis-uncertain',
      message: 'the ppm axis fits nearly as well in another place; check the shifts before using the numbers',
    },
  ];
}

/** Reversing the direction of frequency turns the sign of the dispersive part. */
function orientImag(imag: Float64Array, isRising: boolean): Float64Array {
  return isRising ? imag.slice().reverse() : imag.map((value) => -value);
}

function orientAxis(
  place: AxisPlace,
  stepPpm: number,
  n: number,
  observeMhz: number,
): { firstPpm: number; stepPpm: number; observeMhz: number } {
  // The centre lies at index n/2; reversed, that point has index n - 1 - n/2.
  const centreIndex = place.isRising ? n - 1 - n / 2 : n / 2;
  return { firstPpm: place.centrePpm + centreIndex * stepPpm, stepPpm, observeMhz };
}
