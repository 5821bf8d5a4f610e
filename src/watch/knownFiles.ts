import type { StampedInput } from '../record/runState.js';
import type { RunMemory } from './runMemory.js';
import type { SpectrumName } from './shareListing.js';
import { statText } from './statCache.js';

/** Codes of refusals that another try may lift although the file does not change. */
const liftableCodes = new Set(['unreadable', 'file-changing', 'still-changing']);
/** Codes whose cause may be gone with another version of the program. */
const versionCodes = new Set(['program-fault', 'measuring-died']);

/** Whether the record already holds the fate of a file as it now stands: then it is not opened. */
export function isKnown(memory: RunMemory, spectrum: SpectrumName, program: string): boolean {
  const state = memory.state.files.get(spectrum.key);
  if (state === undefined || !isLasting(state.latest, program)) return false;
  if (statOf(state.latest) === statText(spectrum.stat)) return true;
  const seen = memory.statCache.get(spectrum.key);
  return seen?.stat === statText(spectrum.stat) && seen.sha256 === state.latest.sha256;
}

function isLasting({ state, flags, engine }: StampedInput, program: string): boolean {
  if (state === 'vanished') return false;
  const codes = (flags ?? []).map(({ code }) => code);
  if (codes.some((code) => liftableCodes.has(code))) return false;
  if (state !== 'set-aside') return true;
  return engine === program || !codes.some((code) => versionCodes.has(code));
}

function statOf({ sizeBytes, modifiedNs, inode }: StampedInput): string | undefined {
  if (sizeBytes === undefined || modifiedNs === undefined || inode === undefined) return undefined;
  return statText({ sizeBytes, modifiedNs: BigInt(modifiedNs), inode: BigInt(inode) });
}
