import { basename } from 'node:path';
import { fail, ok, type Result } from '../base/result.js';
import { sha256 } from '../base/sha256.js';
import type { DraftSource } from '../method/draftMethod.js';
import { listedFromMultiplets } from '../method/listedFromMultiplets.js';
import type { Method } from '../method/method.js';
import { processTimePoint } from '../point/processTimePoint.js';
import { readInput } from './readInput.js';

/**
 * Picks the multiplets of a spectrum: what a method without species leaves unassigned.
 *
 * @param path     JCAMP-DX file; of a multi-block file the first usable block counts
 * @param nucleus  of the method
 * @param solvent  usual name; its residual signal and known trace substances are left out
 * @returns one compound with the picked signals, counts of nuclei from area ratios
 * @errors  those of `readInput` and `processTimePoint`; draft-no-multiplets
 */
export async function draftFromSpectrum(
  path: string,
  nucleus: string,
  solvent: string | undefined,
): Promise<Result<DraftSource>> {
  const bytes = await readInput(path);
  if (!bytes.ok) return bytes;
  const records = processTimePoint(bytes.value, basename(path), emptyMethod(nucleus, solvent));
  if (!records.ok) return records;
  const record = records.value.find(({ measurement }) => measurement !== undefined);
  const refusal = records.value[0]?.flags.find(({ weight }) => weight === 'set-aside');
  const picked = record?.measurement?.unassigned.filter(({ suggestion }) => suggestion === undefined) ?? [];
  const listed = listedFromMultiplets(picked);
  if (listed.length > 0) return ok({ name: 'observed', listed });
  const message = `${path}: ${refusal?.message ?? 'no multiplets were found'}`;
  return fail({ code: 'draft-no-multiplets', area: 'usage', message, retry: 'never' });
}

function emptyMethod(nucleus: string, solvent: string | undefined): Method {
  return {
    title: 'Draft',
    version: '1',
    sha256: sha256('draft'),
    nucleus,
    ...(solvent !== undefined ? { solvent } : {}),
    reference: { signal: solvent === undefined ? 'tetramethylsilane' : 'solvent' },
    species: [],
    limits: [],
    processing: { lineBroadeningHz: 'matched', zeroFilling: 2, phase: 'automatic', baseline: 'automatic' },
    acquisition: {},
    kinetics: {},
    quality: {},
    input: {},
  };
}
