import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { compositeSpins } from '../../src/pattern/compositeSpins.js';
import { exactLines, isSolvable } from '../../src/pattern/exactLines.js';
import { firstOrderLines } from '../../src/pattern/firstOrderLines.js';
import { parsePattern } from '../../src/pattern/parsePattern.js';
import { solveSpinSystem } from '../../src/pattern/solveSpinSystem.js';
import type { SpinSystem } from '../../src/pattern/spinSystem.js';

type Group = readonly [signal: string, nuclei: number, frequencyHz: number];
type Pair = readonly [string, string, number];

function systemOf(groups: readonly Group[], pairs: readonly Pair[]): SpinSystem {
  const couplingsHz = groups.map(([a], i) =>
    groups.map(([b], j) =>
      i === j ? 0 : (pairs.find((pair) => (pair[0] === a && pair[1] === b) || (pair[0] === b && pair[1] === a))?.[2] ?? 0),
    ),
  );
  return { groups: groups.map(([signal, nuclei, frequencyHz]) => ({ signal, nuclei, frequencyHz })), couplingsHz };
}

interface Drawn {
  readonly frequencyHz: number;
  readonly intensity: number;
}

/** All lines of all signals on one scale. */
function allLines(system: SpinSystem): Drawn[] {
  const shared = exactLines(system);
  return [...shared].flatMap(([signal, lines]) => {
    const own = system.groups.filter((group) => group.signal === signal);
    const nuclei = own.reduce((sum, group) => sum + group.nuclei, 0);
    const centre = own.reduce((sum, group) => sum + group.nuclei * group.frequencyHz, 0) / nuclei;
    return lines.map(({ offsetHz, share }) => ({ frequencyHz: centre + offsetHz, intensity: nuclei * share }));
  });
}

/** Largest difference of two stick spectra drawn with Lorentzian lines, relative to the tallest point. */
function worstDifference(a: readonly Drawn[], b: readonly Drawn[], widthHz: number): number {
  const low = Math.min(...b.map((line) => line.frequencyHz)) - 5;
  const high = Math.max(...b.map((line) => line.frequencyHz)) + 5;
  const draw = (lines: readonly Drawn[], at: number) =>
    lines.reduce((sum, { frequencyHz, intensity }) => sum + intensity / (1 + ((2 * (at - frequencyHz)) / widthHz) ** 2), 0);
  let worst = 0;
  let tallest = 0;
  for (let at = low; at < high; at += widthHz / 5) {
    const expected = draw(b, at);
    worst = Math.max(worst, Math.abs(draw(a, at) - expected));
    tallest = Math.max(tallest, expected);
  }
  return worst / tallest;
}

interface ReferenceCase {
  readonly groups: readonly Group[];
  readonly pairs: readonly Pair[];
  readonly lines: readonly (readonly [number, number])[];
}

// Source: test/reference/pattern/diagonalise.py, a plain NumPy diagonalisation of the whole Hamiltonian.
const reference = JSON.parse(readFileSync(new URL('../reference/pattern/spinSystems.json', import.meta.url), 'utf8')) as Record<
  string,
  ReferenceCase
>;

describe('exactLines against a plain diagonalisation', () => {
  it.each(Object.entries(reference))('agrees for %s', (_, { groups, pairs, lines }) => {
    const expected = lines.map(([frequencyHz, intensity]) => ({ frequencyHz, intensity }));
    // 1.5e-3 at a width of 0.5 Hz: lines that no width can tell apart are joined, see `thinLines`.
    expect(worstDifference(allLines(systemOf(groups, pairs)), expected, 0.5)).toBeLessThan(1.5e-3);
  });

  it('tells a wrong coupling: the comparison can fail', () => {
    const { groups, lines } = reference.A2B!;
    const expected = lines.map(([frequencyHz, intensity]) => ({ frequencyHz, intensity }));
    expect(worstDifference(allLines(systemOf(groups, [['A', 'B', 7.2]])), expected, 0.3)).toBeGreaterThan(0.02);
  });
});

describe('solveSpinSystem', () => {
  // Source: shared worked examples, section 5.4 (Pople, Schneider, Bernstein 1959): J, dnu, offsets and intensities.
  it.each([
    [12, 30, 22.1555, 10.1555, 0.62861, 1.37139],
    [7, 7, 8.4497, 1.4497, 0.29289, 1.70711],
    [10, 6, 10.831, 0.831, 0.14251, 1.85749],
    [16, 4, 16.2462, 0.2462, 0.02986, 1.97014],
  ])(
    'gives the AB quartet of J %d and shift difference %d Hz',
    (coupling, difference, outer, inner, outerIntensity, innerIntensity) => {
      const groups: Group[] = [
        ['A', 1, difference / 2],
        ['B', 1, -difference / 2],
      ];
      const { frequencyHz, intensity } = solveSpinSystem(systemOf(groups, [['A', 'B', coupling]]));
      for (const [index, expected] of [outer, inner, -inner, -outer].entries())
        expect(frequencyHz[index]).toBeCloseTo(expected, 4);
      // The published intensities sum to 4, these to the number of nuclei, 2.
      for (const [index, expected] of [outerIntensity, innerIntensity, innerIntensity, outerIntensity].entries())
        expect(2 * intensity[index]!).toBeCloseTo(expected, 5);
    },
  );

  it('gives the AB part of an ABX system as two AB quartets with effective shifts', () => {
    // Source: ABX treatment of Pople, Schneider, Bernstein (from memory): for X up and down, A and B shift by +-J(AX)/2, +-J(BX)/2.
    const [a, b, x, jab, jax, jbx] = [220, 205, -3000, -14, 4.5, 9.5];
    const groups: Group[] = [
      ['A', 1, a],
      ['B', 1, b],
      ['X', 1, x],
    ];
    const { frequencyHz, intensity } = solveSpinSystem(
      systemOf(groups, [
        ['A', 'B', jab],
        ['A', 'X', jax],
        ['B', 'X', jbx],
      ]),
    );
    const expected = [0.5, -0.5].flatMap((m) => {
      const difference = a - b + m * (jax - jbx);
      const centre = (a + b + m * (jax + jbx)) / 2;
      const d = Math.hypot(difference, jab);
      const size = Math.abs(jab);
      return [1, -1].flatMap((side) => [
        [centre + (side * (d + size)) / 2, (1 - size / d) / 4],
        [centre + (side * (d - size)) / 2, (1 + size / d) / 4],
      ]);
    });
    expected.sort((p, q) => q[0]! - p[0]!);
    const found = [...frequencyHz].flatMap((frequency, index) =>
      frequency > 0 && intensity[index]! > 1e-6 ? [[frequency, intensity[index]!]] : [],
    );
    expect(found).toHaveLength(8);
    for (const [index, [frequency, strength]] of expected.entries()) {
      // X is 3200 Hz away, not infinitely far: J^2 / (2 x 3200) is 0.014 Hz.
      expect(Math.abs(found[index]![0]! - frequency!)).toBeLessThan(0.02);
      expect(Math.abs(found[index]![1]! - strength!)).toBeLessThan(0.005);
    }
  });

  it.each([
    [1, [[1, 1]]],
    [
      2,
      [
        [2, 1],
        [0, 1],
      ],
    ],
    [
      3,
      [
        [3, 1],
        [1, 2],
      ],
    ],
    [
      6,
      [
        [6, 1],
        [4, 5],
        [2, 9],
        [0, 5],
      ],
    ],
    [
      9,
      [
        [9, 1],
        [7, 8],
        [5, 27],
        [3, 48],
        [1, 42],
      ],
    ],
  ])('forms the total spins of %i equivalent nuclei, all states counted', (nuclei, expected) => {
    expect(compositeSpins(nuclei).map(({ twiceSpin, ways }) => [twiceSpin, ways])).toEqual(expected);
    expect(compositeSpins(nuclei).reduce((sum, { twiceSpin, ways }) => sum + (twiceSpin + 1) * ways, 0)).toBe(2 ** nuclei);
  });
});

const propyl = (scale: number): SpinSystem =>
  systemOf(
    [
      ['CH3', 3, 0.95 * scale],
      ['CH2', 2, 1.65 * scale],
      ['OCH2', 2, 4.05 * scale],
    ],
    [
      ['CH3', 'CH2', 7.4],
      ['CH2', 'OCH2', 6.7],
    ],
  );

describe('exactLines', () => {
  it.each([1, 60, 100, 400])('makes the total intensity the number of nuclei and each share sum 1, at %d MHz', (scale) => {
    for (const system of [propyl(scale), systemOf(reference["AA'BB' ring"]!.groups, reference["AA'BB' ring"]!.pairs)]) {
      const nuclei = system.groups.reduce((sum, group) => sum + group.nuclei, 0);
      const { intensity } = solveSpinSystem(system);
      expect(intensity.reduce((sum, value) => sum + value, 0)).toBeCloseTo(nuclei, 5);
      for (const lines of exactLines(system).values()) {
        expect(lines.reduce((sum, line) => sum + line.share, 0)).toBeCloseTo(1, 10);
        expect(Math.min(...lines.map((line) => line.share))).toBeGreaterThan(0);
      }
    }
  });

  it('keeps the centre of gravity of the whole spectrum', () => {
    for (const scale of [20, 60, 400]) {
      const system = propyl(scale);
      const { frequencyHz, intensity } = solveSpinSystem(system);
      const moment = frequencyHz.reduce((sum, frequency, index) => sum + frequency * intensity[index]!, 0);
      const expected = system.groups.reduce((sum, group) => sum + group.frequencyHz * group.nuclei, 0);
      expect(moment / 7).toBeCloseTo(expected / 7, 3);
    }
  });

  it('tends to the first-order pattern where shift differences are large', () => {
    const pattern = parsePattern('t', [7.1]);
    if (!pattern.ok) throw new Error(pattern.problem.message);
    const difference = (scale: number) => {
      const groups: Group[] = [
        ['CH2', 2, 4.12 * scale],
        ['CH3', 3, 1.25 * scale],
      ];
      const lines = exactLines(systemOf(groups, [['CH2', 'CH3', 7.1]])).get('CH3')!;
      const draw = (line: { offsetHz: number; share: number }) => ({ frequencyHz: line.offsetHz, intensity: line.share });
      return worstDifference(lines.map(draw), firstOrderLines(pattern.value).map(draw), 1);
    };
    expect(difference(100_000)).toBeLessThan(1e-3);
    expect(difference(60)).toBeGreaterThan(0.03);
    expect(difference(60)).toBeGreaterThan(difference(400));
  });

  it('leans each multiplet towards its partner: the roof', () => {
    for (const sign of [1, -1]) {
      const groups: Group[] = [
        ['A', 2, 60 * sign],
        ['B', 3, -60 * sign],
      ];
      const lines = exactLines(systemOf(groups, [['A', 'B', 7]]));
      // The middle line of a triplet leans neither way.
      const outer = (signal: string) => lines.get(signal)!.filter((line) => Math.abs(line.offsetHz) > 2);
      const lean = (signal: string) => outer(signal).reduce((sum, line) => sum + line.share * Math.sign(line.offsetHz), 0);
      expect(lean('A') * sign).toBeLessThan(-0.05);
      expect(lean('B') * sign).toBeGreaterThan(0.05);
    }
  });

  it('shows one line for nuclei of one shift, however they couple', () => {
    const lines = exactLines(
      systemOf(
        [
          ['A', 2, 100],
          ['B', 3, 100],
        ],
        [['A', 'B', 7]],
      ),
    );
    for (const own of lines.values()) expect(own).toHaveLength(1);
  });

  it('gives a coupled ring more lines than two doublets', () => {
    const { groups, pairs } = reference["AA'BB' ring"]!;
    const named = systemOf(groups, pairs);
    const system = { ...named, groups: named.groups.map((group) => ({ ...group, signal: group.signal[0]! })) };
    const strong = exactLines(system)
      .get('A')!
      .filter((line) => line.share > 0.01);
    expect(strong.length).toBeGreaterThan(4);
  });

  it('solves a butyl chain of nine protons in well under 20 ms, and at once when asked again', () => {
    const { groups, pairs } = reference['A3B2C2D2 butyl']!;
    const moved = (by: number) =>
      systemOf(
        groups.map(([name, nuclei, at]) => [name, nuclei, at + by * nuclei] as const),
        pairs,
      );
    for (let warm = 0; warm < 8; warm++) exactLines(moved(warm / 10));
    // The best of several, because other processes share the machine.
    const timed = Array.from({ length: 8 }, (_, index) => {
      const start = performance.now();
      exactLines(moved(1 + index / 10));
      return performance.now() - start;
    });
    expect(Math.min(...timed)).toBeLessThan(20);
    const start = performance.now();
    for (let turn = 0; turn < 100; turn++) exactLines(moved(1));
    expect((performance.now() - start) / 100).toBeLessThan(0.5);
  });

  it('knows which systems take too long', () => {
    expect(isSolvable([3, 2, 2, 2])).toBe(true);
    expect(isSolvable([9, 6, 6, 1])).toBe(false);
  });
});
