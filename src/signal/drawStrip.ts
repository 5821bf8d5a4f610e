import type { Spectrum } from '../spectrum/spectrum.js';
import type { FittedRegion } from './fitRegions.js';
import type { Strip } from './measured.js';
import type { Target } from './signalTargets.js';
import { sticksOf } from './tailsOf.js';

const pointsMax = 160;
const marginWidths = 12;
const sticksMax = 40;

/**
 * Draws data, fit and expected lines of one signal for the report. Where the strip holds more points than can be drawn, each
 * drawn point is the data point that lies furthest from the strip's baseline among those it stands for, and the fit there.
 *
 * @returns at most 160 points, in units of the tallest data point; absent for signals that nobody asked to see
 * @source  common practice for drawing long traces
 */
export function drawStrip(spectrum: Spectrum, fitted: FittedRegion, target: Target): Strip | undefined {
  if (target.signal.use === 'ignore') return undefined;
  const { window, fit } = fitted;
  const lines = sticksOf(fit);
  const own = lines.filter((line) => line.key === target.key);
  const width = own[0]!.widthHz;
  const high = Math.max(...own.map((line) => line.shiftHz)) + marginWidths * width;
  const low = Math.min(...own.map((line) => line.shiftHz)) - marginWidths * width;
  const from = Math.max(0, Math.floor((window.firstHz - high) / window.stepHz));
  const to = Math.min(window.data.length, Math.ceil((window.firstHz - low) / window.stepHz) + 1);
  const per = Math.max(1, Math.ceil((to - from) / pointsMax));
  const data: number[] = [];
  const drawn: number[] = [];
  for (let start = from; start < to; start += per) {
    let pick = start;
    for (let i = start; i < Math.min(to, start + per); i += 1) {
      if (Math.abs(window.data[i]! - fit.level) > Math.abs(window.data[pick]! - fit.level)) pick = i;
    }
    data.push(window.data[pick]!);
    drawn.push(fit.fit[pick]!);
  }
  const scale = Math.max(...data.map(Math.abs), Number.MIN_VALUE);
  const { observeMhz } = spectrum;
  return {
    firstPpm: round((window.firstHz - (from + (per - 1) / 2) * window.stepHz) / observeMhz, 7),
    stepPpm: round((per * window.stepHz) / observeMhz, 7),
    data: data.map((value) => round(value / scale)),
    fit: drawn.map((value) => round(value / scale)),
    scale: round(scale, 6),
    sticks: lines
      .filter((line) => line.shiftHz <= high && line.shiftHz >= low)
      .sort((a, b) => b.area - a.area || b.shiftHz - a.shiftHz)
      .slice(0, sticksMax)
      .map((line) => ({
        shiftPpm: round(line.shiftHz / observeMhz, 7),
        height: round((line.area * 2) / (Math.PI * line.widthHz) / scale),
        signal: line.key,
      })),
  };
}

function round(value: number, digits = 4): number {
  return Number(value.toPrecision(digits));
}
