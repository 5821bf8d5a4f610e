import type { Flag } from '../base/flag.js';
import { ok, type Problem, type Result } from '../base/result.js';
import { sha256 } from '../base/sha256.js';
import { programVersion } from '../base/version.js';
import type { Acquisition } from '../decode/acquisition.js';
import { decodeJcamp } from '../decode/decodeJcamp.js';
import type { Method } from '../method/method.js';
import { measureSignals } from '../signal/measureSignals.js';
import { makeSpectrum } from '../spectrum/makeSpectrum.js';
import { deriveOverview } from './deriveOverview.js';
import type { PointRecord } from './pointRecord.js';
import { statusOf } from './statusOf.js';

/**
 * The table of contents of a time point: bytes -> acquisition -> spectrum -> signals -> point record.
 *
 * A pure function of (bytes, method, program version): no clock, no file, no order of arrival. Amounts, conversion and
 * everything that needs the run file or other points come later, from the set of point records (`deriveSeries`).
 *
 * @param bytes    the file as captured
 * @param fileName used in messages only
 * @param method   the method of the run
 * @returns one record per spectrum block; a block that cannot be used is a record with status `set-aside` and its reason
 * @errors every `jcamp-*` code of `decodeJcamp` when the file as a whole cannot be read
 */
export function processTimePoint(bytes: Uint8Array, fileName: string, method: Method): Result<readonly PointRecord[]> {
  const decoded = decodeJcamp(bytes, fileName, privateRecordsOf(method));
  if (!decoded.ok) return decoded;
  const single = decoded.value.length === 1 ? decoded.value[0] : undefined;
  if (single && !single.ok) return single;

  const fileSha256 = sha256(bytes);
  const records = decoded.value.map((block, index) =>
    block.ok ? measureBlock(block.value, fileSha256, method) : refusedBlock(block.problem, index + 1, fileSha256, method),
  );
  return ok(records);
}

function measureBlock(acquisition: Acquisition, fileSha256: string, method: Method): PointRecord {
  const identity = identityOf(acquisition, fileSha256, method);
  const spectrum = makeSpectrum(acquisition, method);
  if (!spectrum.ok) return setAside(identity, acquisition.flags, spectrum.problem);

  const measurement = measureSignals(spectrum.value, method);
  const flags = [...acquisition.flags, ...spectrum.value.flags, ...measurement.flags];
  const { quality, reference, steps, noise } = spectrum.value;
  return {
    ...identity,
    status: statusOf(flags),
    flags,
    quality: { ...quality, signalToNoise: measurement.signalToNoise, noise },
    reference,
    steps,
    measurement,
    overview: deriveOverview(spectrum.value),
  };
}

type Identity = Omit<PointRecord, 'status' | 'flags' | 'steps'>;

function identityOf(acquisition: Acquisition, fileSha256: string, method: Method): Identity {
  const { title, acquiredSource, dataSha256, kind, block, acquired, nucleus, observeMhz } = acquisition;
  return {
    format: 'kinetrail.point/1',
    program: programVersion,
    sha256: fileSha256,
    methodSha256: method.sha256,
    title,
    acquiredSource,
    dataSha256,
    kind,
    ...(block !== undefined ? { block } : {}),
    ...(acquired !== undefined ? { acquired } : {}),
    ...(nucleus !== undefined ? { nucleus } : {}),
    ...(observeMhz !== undefined ? { observeMhz } : {}),
  };
}

function refusedBlock(problem: Problem, block: number, fileSha256: string, method: Method): PointRecord {
  const identity: Identity = {
    format: 'kinetrail.point/1',
    program: programVersion,
    sha256: fileSha256,
    methodSha256: method.sha256,
    block,
    title: '',
    acquiredSource: 'none',
    dataSha256: '',
    kind: 'unreadable',
  };
  return setAside(identity, [], problem);
}

function setAside(identity: Identity, earlier: readonly Flag[], problem: Problem): PointRecord {
  const reason: Flag = { code: problem.code, message: problem.message, weight: 'set-aside' };
  return { ...identity, status: 'set-aside', flags: [...earlier, reason], steps: [] };
}

function privateRecordsOf(method: Method): { privateRecords?: readonly string[] } {
  const named = [method.input.carrierPpmRecord, method.input.onsetPointsRecord].filter((name) => name !== undefined);
  return named.length > 0 ? { privateRecords: named } : {};
}
