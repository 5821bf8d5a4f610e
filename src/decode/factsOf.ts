import { ok, type Result } from '../base/result.js';
import type { Acquisition, ShiftReference } from './acquisition.js';
import { type Header, headerNumber, headerText, numberOf, optionalNumber } from './headerOf.js';
import { refuse, shown, tolerated } from './jcampProblem.js';
import { parseNumber } from './parseNumber.js';
import { plainLabel } from './walkRecords.js';

type Facts = Pick<
  Acquisition,
  | 'solventName'
  | 'scans'
  | 'acquisitionMode'
  | 'temperatureC'
  | 'shiftReference'
  | 'acquisitionTimeS'
  | 'fieldT'
  | 'privateRecords'
>;

/** Highest observe frequency that is believed to be in MHz. */
const observeMhzMax = 3000;

/**
 * Reads the standard records that describe the measurement. Values that are not understood are left out with a note.
 *
 * @param privateRecords names of private records that the site asked for; no other one is read
 */
export function factsOf(header: Header, privateRecords: readonly string[]): Facts {
  const solventName = headerText(header, '.SOLVENTNAME');
  const scans = optionalNumber(header, '.AVERAGES');
  const temperatureC = optionalNumber(header, 'TEMPERATURE');
  const acquisitionTimeS = optionalNumber(header, '.ACQUISITIONTIME');
  const fieldT = optionalNumber(header, '.FIELD');
  const acquisitionMode = modeOf(header);
  const shiftReference = shiftReferenceOf(header);
  const named = privateRecordsOf(header, privateRecords);
  return {
    ...(solventName !== undefined ? { solventName } : {}),
    ...(scans !== undefined ? { scans } : {}),
    ...(temperatureC !== undefined ? { temperatureC } : {}),
    ...(acquisitionTimeS !== undefined ? { acquisitionTimeS } : {}),
    ...(fieldT !== undefined ? { fieldT } : {}),
    ...(acquisitionMode !== undefined ? { acquisitionMode } : {}),
    ...(shiftReference !== undefined ? { shiftReference } : {}),
    ...(named !== undefined ? { privateRecords: named } : {}),
  };
}

/** `^1H`, `1H`, `H1` or `<1H>` as `1H`. Anything else is left out with a note. */
export function nucleusOf(header: Header): string | undefined {
  const text = headerText(header, '.OBSERVENUCLEUS');
  if (text === undefined) return undefined;
  const match = /^\^?(\d{1,3})([A-Z][A-Z]?)$|^([A-Z][A-Z]?)-?(\d{1,3})$/i.exec(text.replace(/[\s<>"{}]/g, ''));
  if (match) {
    const element = (match[2] ?? match[3])!;
    return `${match[1] ?? match[4]}${element[0]!.toUpperCase()}${element.slice(1).toLowerCase()}`;
  }
  header.flags.push(tolerated('jcamp-value-unreadable', `##.OBSERVE NUCLEUS= "${shown(text)}" is not understood; passed over`));
  return undefined;
}

/** Observe frequency in MHz; an axis in ppm cannot do without. @errors jcamp-number, jcamp-record-missing */
export function observeMhzOf(header: Header, unit: 's' | 'Hz' | 'ppm'): Result<number | undefined> {
  const found = headerNumber(header, '.OBSERVEFREQUENCY');
  if (!found.ok) return found;
  const value = found.value?.value;
  const label = '.OBSERVE FREQUENCY';
  if (value === undefined)
    return unit === 'ppm'
      ? refuse('jcamp-record-missing', `##${label}= is missing: a width in ppm cannot be turned into hertz`, { label })
      : ok(undefined);
  if (!(value > 0 && value <= observeMhzMax))
    return refuse('jcamp-number', `##${label}= is ${value}; expected MHz, above 0 and up to ${observeMhzMax}`, { label });
  return ok(value);
}

function modeOf(header: Header): Acquisition['acquisitionMode'] {
  const text = headerText(header, '.ACQUISITIONMODE')?.toUpperCase() ?? '';
  if (text.startsWith('SIMUL')) return 'simultaneous';
  if (text.startsWith('SEQ')) return 'sequential';
  return text.startsWith('SINGLE') ? 'single' : undefined;
}

/**
 * `INTERNAL, CDCl3, 1, 15.47`: place, compound, 1-based point, shift.
 *
 * Where blanks follow the separating commas, others belong to a compound's name or are decimal ones; without blanks there must be
 * exactly four entries.
 */
function shiftReferenceOf(header: Header): ShiftReference | undefined {
  const record = header.records.get('.SHIFTREFERENCE');
  const text = headerText(header, '.SHIFTREFERENCE')?.replace(/^\(|\)$/g, '');
  if (!record || text === undefined) return undefined;
  const spaced = text.split(/,\s+/).map((word) => word.trim());
  const words = spaced.length === 4 ? spaced : text.split(',').map((word) => word.trim());
  const [place = '', compound = '', point = '', shift = ''] = words;
  const pointNumber = parseNumber(point);
  const shiftPpm = words.length === 4 ? numberOf(header, record, shift) : undefined;
  const isUsable = typeof pointNumber !== 'string' && Number.isInteger(pointNumber.value) && pointNumber.value >= 0;
  if (!isUsable || !shiftPpm?.ok) {
    header.flags.push(tolerated('jcamp-value-unreadable', `##.SHIFT REFERENCE= "${shown(text)}" is not understood; passed over`));
    return undefined;
  }
  const written = place.toLowerCase();
  const known = written === 'internal' || written === 'external' ? written : 'unknown';
  return { place: known, compound, pointNumber: pointNumber.value, shiftPpm: shiftPpm.value.value };
}

function privateRecordsOf(header: Header, names: readonly string[]): Readonly<Record<string, string>> | undefined {
  const found: Record<string, string> = Object.create(null) as Record<string, string>;
  let count = 0;
  for (const name of names) {
    const text = headerText(header, plainLabel(name.replace(/^#*/, '')));
    if (text === undefined) continue;
    Object.defineProperty(found, name, { value: text, enumerable: true });
    count += 1;
  }
  return count > 0 ? found : undefined;
}
