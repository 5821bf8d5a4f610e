import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { decodeJcamp } from '../../src/decode/decodeJcamp.js';
import { expectedLines } from '../../src/method/expectedLines.js';
import { patternPeaks } from '../../src/pattern/patternPeaks.js';
import { speciesOf } from './speciesOf.js';

const observeMhz = 200.136;
/** Hz of the first point and between points, as the header of the file states them. */
const firstHz = 2391.297363;
const stepHz = 0.341045;

/** Local maxima above a share of the tallest one, Hz. */
function dataPeaks(real: Float64Array, least: number): number[] {
  const tallest = real.reduce((most, value, index) => (firstHz - index * stepHz > 1400 ? Math.max(most, value) : most), 0);
  return Array.from(real.keys()).flatMap((index) => {
    const hz = firstHz - index * stepHz;
    const value = real[index]!;
    const isPeak = value > (real[index - 1] ?? 0) && value >= (real[index + 1] ?? 0) && value > least * tallest;
    const [before, after] = [real[index - 1] ?? 0, real[index + 1] ?? 0];
    const vertex = (0.5 * (before - after)) / (before - 2 * value + after);
    return isPeak && hz > 1400 && hz < 1600 ? [hz - vertex * stepHz] : [];
  });
}

describe('expectedLines on a real ring', () => {
  // Data: o-dichlorobenzene, 200 MHz, public domain (test/data/PROVENANCE.csv). Couplings: J(3,4) 8.1, J(3,5) 1.5, J(3,6) 0.3,
  // J(4,5) 7.5 Hz, long known for this compound (from memory); the last digits and the two shifts were fitted once to these data
  // with SciPy and the plain diagonalisation of test/reference/pattern, not with this program.
  const ring = speciesOf({
    outer: { listed: `${(1486.9 + 21.04) / observeMhz} (m, 2H)`, coupled: { inner: 8.05 }, cross: [1.54, 0.345] },
    inner: { listed: `${(1486.9 - 21.04) / observeMhz} (m, 2H)`, cross: [1.54, 7.47] },
  });

  it("places every line of the AA'BB' spectrum of o-dichlorobenzene", () => {
    const bytes = readFileSync(new URL('../data/conformance/o05.jdx', import.meta.url));
    const decoded = decodeJcamp(new Uint8Array(bytes), 'o05.jdx');
    const block = decoded.ok ? decoded.value[0] : undefined;
    if (!block?.ok) throw new Error('the file must decode');
    const found = dataPeaks(block.value.real, 0.1);
    const lines = expectedLines(ring, observeMhz);
    const whole = [...lines].flatMap(([id, own]) => {
      const centre = ring.signals.find((signal) => signal.id === id)!.shiftPpm * observeMhz;
      return own.map((line) => ({ offsetHz: centre + line.offsetHz, share: line.share / 2 }));
    });
    const expected = patternPeaks(whole, 0.5);
    expect(found.length).toBeGreaterThanOrEqual(10);
    // The axis has a point every 0.34 Hz: a peak is known to a part of that.
    for (const hz of found) expect(Math.min(...expected.map((peak) => Math.abs(peak.offsetHz - hz)))).toBeLessThan(0.2);
    // Two pairs of lines 0.43 Hz apart are one peak on that axis, so the other way round the lines are drawn 1 Hz wide.
    const wide = patternPeaks(whole, 1).filter(({ height }) => height > 0.15);
    expect(wide).toHaveLength(10);
    for (const peak of wide) expect(Math.min(...found.map((hz) => Math.abs(peak.offsetHz - hz)))).toBeLessThan(0.3);
  });

  it('would not do so with every nucleus coupled alike (A2B2)', () => {
    const alike = speciesOf({
      outer: { listed: `${(1486.9 + 21.04) / observeMhz} (m, 2H)`, coupled: { inner: 8.05 } },
      inner: `${(1486.9 - 21.04) / observeMhz} (m, 2H)`,
    });
    const peaks = patternPeaks(expectedLines(alike, observeMhz).get('outer')!, 0.5).map(
      ({ offsetHz }) => 1486.9 + 21.04 + offsetHz,
    );
    const bytes = readFileSync(new URL('../data/conformance/o05.jdx', import.meta.url));
    const decoded = decodeJcamp(new Uint8Array(bytes), 'o05.jdx');
    const block = decoded.ok ? decoded.value[0] : undefined;
    if (!block?.ok) throw new Error('the file must decode');
    const found = dataPeaks(block.value.real, 0.1).filter((hz) => hz > 1487);
    expect(Math.max(...found.map((hz) => Math.min(...peaks.map((peak) => Math.abs(peak - hz)))))).toBeGreaterThan(1);
  });
});
