import type { Amounts } from '../amount/amounts.js';
import type { PointRecord } from '../point/pointRecord.js';
import { alignColumns } from './alignColumns.js';
import { plainNumber, plainQuantity } from './plainNumber.js';
import { escapeForTerminal } from './terminalText.js';

/** The terminal form of one measured time point: a head, the signals, the species, what is unassigned, the flags. */
export function measureText(path: string, record: PointRecord, amounts: Amounts | undefined, widthColumns: number): string {
  const block = record.block !== undefined ? `, block ${record.block}` : '';
  const lines = [`${escapeForTerminal(path)}${block}: ${record.status}`];
  if (record.observeMhz !== undefined)
    lines.push(
      `  ${record.nucleus ?? ''} at ${record.observeMhz.toPrecision(6)} MHz, acquired ${record.acquired ?? 'at an unstated time'}`,
    );
  const measurement = record.measurement;
  if (measurement) {
    lines.push('', ...signalTable(measurement, widthColumns));
    if (measurement.unassigned.length > 0) lines.push('', ...unassignedTable(measurement.unassigned));
  }
  if (amounts) lines.push('', ...speciesTable(amounts));
  if (record.flags.length > 0)
    lines.push(
      '',
      ...record.flags.map(
        (flag) => `  ${flag.weight === 'note' ? 'note' : 'flag'} ${flag.code}: ${escapeForTerminal(flag.message)}`,
      ),
    );
  return `${lines.join('\n')}\n\n`;
}

type Measurement = NonNullable<PointRecord['measurement']>;

function signalTable(measurement: Measurement, widthColumns: number): string[] {
  const rows = measurement.signals.map((signal) => [
    signal.key,
    plainNumber(signal.shiftPpm, 4),
    plainQuantity(signal.area, signal.u),
    plainNumber(signal.widthHz, 2),
    signal.verdict,
    ...(widthColumns >= 100 ? [signal.words] : []),
  ]);
  const heads = ['signal', 'shift/ppm', 'area (u)', 'width/Hz', 'verdict', ...(widthColumns >= 100 ? ['in words'] : [])];
  return alignColumns([heads, ...rows], [1, 3]);
}

function unassignedTable(unassigned: Measurement['unassigned']): string[] {
  const rows = unassigned.map((line) => [
    plainNumber(line.shiftPpm, 3),
    line.pattern,
    plainQuantity(line.area, line.u),
    line.suggestion ?? '',
  ]);
  return alignColumns([['unassigned/ppm', 'pattern', 'area (u)', 'suggestion'], ...rows], [0]);
}

function speciesTable(amounts: Amounts): string[] {
  const unit = amounts.unit === 'relative' ? 'relative' : amounts.unit;
  const rows = Object.entries(amounts.species).map(([id, species]) => [
    id,
    plainQuantity(species.amount, species.u),
    species.moleFraction !== undefined ? plainQuantity(species.moleFraction, species.moleFractionU ?? 0) : '',
  ]);
  const lines = alignColumns([['species', `amount/${unit} (u)`, 'mole fraction (u)'], ...rows], []);
  if (amounts.conversion) lines.push(`  conversion ${plainQuantity(amounts.conversion.value, amounts.conversion.u)}`);
  return lines;
}
