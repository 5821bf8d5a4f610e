import { describe, expect, it } from 'vitest';
import { addTerm, type TermAxis, type TermState, termColumns } from '../../src/signal/addTerm.js';
import type { Term } from '../../src/signal/regionModel.js';

const term: Term = {
  key: 'x',
  lines: [
    { offsetHz: 3.5, share: 0.25, perCoupling: [0.5], extraWidthHz: 0.4 },
    { offsetHz: -3.5, share: 0.75, perCoupling: [-0.5] },
  ],
  shift: 0,
  widths: [],
  phase: 0,
  couplings: [0],
};
const state: TermState = { shiftHz: 0.3, widthHz: 1.1, phase: 0.05, lorentzShare: 0.8, isShareFree: true, couplings: [0.1] };
const cut: TermAxis = { firstHz: 12, stepHz: 0.11, acquisitionS: 0.9, blur: 0.01, rippleFactor: 0.7 };

function columnsAt(change: Partial<TermState>, axis: TermAxis) {
  const columns = termColumns(220, 1);
  addTerm(term, { ...state, ...change }, axis, columns);
  return columns;
}

describe('addTerm', () => {
  it.each([
    ['shift', 'byShift', (d: number) => ({ shiftHz: state.shiftHz + d })],
    ['log width', 'byLogWidth', (d: number) => ({ widthHz: state.widthHz * Math.exp(d) })],
    ['phase', 'byPhase', (d: number) => ({ phase: state.phase + d })],
    ['Lorentz share', 'byLorentzShare', (d: number) => ({ lorentzShare: state.lorentzShare + d })],
  ] as const)('has the derivative by %s that finite differences give, with ripple, blur and a mixed shape', (_, name, change) => {
    const analytic = columnsAt({}, cut)[name];
    const step = 1e-5;
    const above = columnsAt(change(step), cut).value;
    const below = columnsAt(change(-step), cut).value;
    // Central differences err by step^2 f''' / 6, far below 1e-6 of the height of about 0.5.
    for (let i = 0; i < analytic.length; i += 1)
      expect(Math.abs((above[i]! - below[i]!) / (2 * step) - analytic[i]!)).toBeLessThan(2e-6);
  });

  it('moves each line by its part of a coupling', () => {
    const analytic = columnsAt({}, cut).byCoupling[0]!;
    const above = columnsAt({ couplings: [0.1 + 1e-5] }, cut).value;
    const below = columnsAt({ couplings: [0.1 - 1e-5] }, cut).value;
    for (let i = 0; i < analytic.length; i += 1)
      expect(Math.abs((above[i]! - below[i]!) / 2e-5 - analytic[i]!)).toBeLessThan(2e-6);
  });

  it('has the height of a Lorentzian, 2 / (pi W), and unit area', () => {
    const columns = termColumns(400_001, 0);
    const one: Term = { ...term, lines: [{ offsetHz: 0, share: 1, perCoupling: [] }], couplings: [] };
    const plain = { shiftHz: 0, widthHz: 1, phase: 0, lorentzShare: 1, isShareFree: false, couplings: [] };
    addTerm(one, plain, { firstHz: 2000, stepHz: 0.01 }, columns);
    // Height: shared formulas, section 4 (derived). Fraction inside +-2000 widths: (2 / pi) atan(4000) = 0.99984.
    expect(Math.max(...columns.value.subarray(199_000, 201_000))).toBeCloseTo(0.63662, 5);
    expect(columns.value.reduce((sum, value) => sum + value, 0) * 0.01).toBeCloseTo((2 / Math.PI) * Math.atan(4000), 5);
  });
});
