import { basename } from 'node:path';
import { fail, ok, type Result } from '../base/result.js';
import { sha256 } from '../base/sha256.js';
import type { Acquisition } from '../decode/acquisition.js';
import { decodeJcamp } from '../decode/decodeJcamp.js';
import type { DraftSource } from '../method/draftMethod.js';
import { type FoundMultiplet, listedFromMultiplets } from '../method/listedFromMultiplets.js';
import type { Method } from '../method/method.js';
import { makeSpectrum } from '../spectrum/makeSpectrum.js';
import type { Spectrum } from '../spectrum/spectrum.js';
import { pickMultiplets } from './pickMultiplets.js';
import { readInput } from './readInput.js';
import { tubeBackground } from './tubeBackground.js';

/** A residual signal, water or the reference is taken for what it is this near to its shift, ppm. */
const sameShiftPpm = 0.04;
const doubtCost: Readonly<Record<string, number>> = { 'axis-uncertain': 10, 'reference-missing': 5, 'reference-split': 1 };

/** What a spectrum proposes, and what to look at before believing it. */
export interface SpectrumDraft {
  readonly source: DraftSource;
  readonly doubts: readonly string[];
}

/**
 * Picks the multiplets of a spectrum. Without species the axis rests on reference and solvent alone, so both are tried and the
 * surer one is taken; its doubts are handed on.
 *
 * @param path     JCAMP-DX file; of a multi-block file the first usable block counts
 * @param nucleus  of the method
 * @param solvent  usual name; its residual signal, water and the reference are left out
 * @returns one compound with the picked signals, counts of nuclei from area ratios
 * @errors  those of `readInput`, `decodeJcamp` and `makeSpectrum`; draft-no-multiplets
 */
export async function draftFromSpectrum(
  path: string,
  nucleus: string,
  solvent: string | undefined,
): Promise<Result<SpectrumDraft>> {
  const bytes = await readInput(path);
  if (!bytes.ok) return bytes;
  const decoded = decodeJcamp(bytes.value, basename(path));
  if (!decoded.ok) return decoded;
  const block = decoded.value.find((one) => one.ok) ?? decoded.value[0];
  if (block === undefined || !block.ok) return block ?? nothing(path);
  const spectrum = surestSpectrum(block.value, nucleus, solvent);
  if (!spectrum.ok) return spectrum;
  const known = [0, ...tubeBackground(nucleus, solvent).map(({ shiftPpm }) => shiftPpm)];
  const isKnown = ({ shiftPpm, pattern }: FoundMultiplet) =>
    /^(?:s|m)$/.test(pattern) && known.some((shift) => Math.abs(shift - shiftPpm) < sameShiftPpm);
  const listed = listedFromMultiplets(pickMultiplets(spectrum.value).filter((found) => nucleus !== '1H' || !isKnown(found)));
  if (listed.length === 0) return nothing(path);
  const doubts = spectrum.value.flags.filter(({ code }) => code in doubtCost).map(({ message }) => message);
  return ok({ source: { name: 'observed', listed }, doubts });
}

function surestSpectrum(acquisition: Acquisition, nucleus: string, solvent: string | undefined): Result<Spectrum> {
  const references = nucleus === '1H' ? ['tetramethylsilane', ...(solvent !== undefined ? ['solvent'] : [])] : ['none'];
  const tried = references.map((reference) => makeSpectrum(acquisition, emptyMethod(nucleus, solvent, reference)));
  const doubt = (result: Result<Spectrum>) =>
    result.ok ? result.value.flags.reduce((sum, { code }) => sum + (doubtCost[code] ?? 0), 0) : Number.POSITIVE_INFINITY;
  return tried.reduce((best, one) => (doubt(one) < doubt(best) ? one : best));
}

function nothing(path: string): Result<never> {
  return fail({ code: 'draft-no-multiplets', area: 'usage', message: `${path}: no multiplets were found`, retry: 'never' });
}

function emptyMethod(nucleus: string, solvent: string | undefined, reference: string): Method {
  return {
    title: 'Draft',
    version: '1',
    sha256: sha256('draft'),
    nucleus,
    ...(solvent !== undefined ? { solvent } : {}),
    reference: { signal: reference },
    species: [],
    limits: [],
    processing: { lineBroadeningHz: 'matched', zeroFilling: 2, phase: 'automatic', baseline: 'automatic' },
    acquisition: {},
    kinetics: {},
    quality: {},
    input: {},
  };
}
