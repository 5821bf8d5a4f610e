import { solventLimits } from '../method/data/ichQ3c.js';
import { type ImpurityShift, impurityShifts } from '../method/data/impurityShifts.js';
import type { Method } from '../method/method.js';
import { firstOrderLines } from '../pattern/firstOrderLines.js';
import { parsePattern } from '../pattern/parsePattern.js';
import type { Line } from '../pattern/pattern.js';
import type { BinnedSpectrum } from './binSpectrum.js';
import type { FittedRegion } from './fitRegions.js';
import { fitTemplate, type TemplateFit } from './fitTemplate.js';
import { lorentzTemplate } from './lorentzTemplate.js';
import type { SolventFinding } from './measured.js';

/** The protonated form of the tube's own solvent is never contamination: its CAS number by deuterated solvent. */
const ownSolvent: Readonly<Record<string, string>> = {
  CDCl3: '67-66-3',
  CD2Cl2: '75-09-2',
  'DMSO-d6': '67-68-5',
  'acetone-d6': '67-64-1',
  CD3CN: '75-05-8',
  CD3OD: '67-56-1',
  C6D6: '71-43-2',
  'toluene-d8': '108-88-3',
  'THF-d8': '109-99-9',
};
/** Significance that a search over a few shifts and some fifty solvents asks for. */
const foundFrom = 4.5;
const sharedPpm = 0.012;
/** One clear line alone must stand out by this. */
const aloneFrom = 7;

type Source = BinnedSpectrum;

interface Candidate {
  readonly name: string;
  readonly cas: string;
  readonly signals: readonly { readonly shiftPpm: number; readonly nuclei: number; readonly lines: readonly Line[] }[];
}

/**
 * Looks for every residual solvent of the limit table that has published shifts in the method's solvent, without being listed: its
 * own patterns are fitted to what the declared signals leave, and its signals must stand in proportion.
 *
 * @param spectrum phased, flat, referenced
 * @param method   with `residual_solvents`; without it nothing is looked for
 * @param regions  what the declared signals explain
 * @param widthHz  full line width of this spectrum
 * @returns one finding a solvent: `found`, `suggested` (one line that others may explain) or `not-detected`
 * @source  shifts: the table of `impurityShifts`; limits: ICH Q3C
 */
export function measureSolvents(
  spectrum: BinnedSpectrum,
  method: Method,
  regions: readonly FittedRegion[],
  widthHz: number,
): readonly SolventFinding[] {
  if (!method.residualSolvents || method.solvent === undefined || method.nucleus !== '1H') return [];
  let open = candidatesOf(method);
  let rest: typeof spectrum = { ...spectrum, real: spectrum.real.slice() };
  const found: SolventFinding[] = [];
  // The surest first: what it explains, the others cannot claim.
  for (let turn = 0; turn < foundMax; turn += 1) {
    const judged = judgeAll(rest, open, regions, widthHz);
    const best = judged
      .filter(({ finding }) => finding.evidence === 'found')
      .sort((a, b) => significance(b) - significance(a))[0];
    if (!best) return [...found, ...judged.map(({ finding }) => finding)].sort((a, b) => (a.name < b.name ? -1 : 1));
    found.push(best.finding);
    open = open.filter(({ cas }) => cas !== best.finding.cas);
    rest = without(rest, best, widthHz);
  }
  return [...found, ...judgeAll(rest, open, regions, widthHz).map(({ finding }) => finding)].sort((a, b) =>
    a.name < b.name ? -1 : 1,
  );
}

const foundMax = 8;

interface Judged {
  readonly candidate: Candidate;
  readonly fits: Fitted;
  readonly finding: SolventFinding;
}

const significance = ({ finding }: Judged) => finding.areaPerNucleus / finding.u;

function judgeAll(
  spectrum: Source,
  candidates: readonly Candidate[],
  regions: readonly FittedRegion[],
  widthHz: number,
): Judged[] {
  const fitted = candidates.map((candidate) => ({
    candidate,
    fits: candidate.signals.map((signal) => ({
      signal,
      fit: fitTemplate(spectrum, regions, signal.shiftPpm, signal.lines, widthHz),
    })),
  }));
  return fitted.map(({ candidate, fits }) => ({ candidate, fits, finding: judge(candidate, fits, fitted) }));
}

/** The spectrum less the signals of a found solvent. */
function without(spectrum: Source, { fits, finding }: Judged, widthHz: number): Source {
  const { firstPpm, stepPpm, stepHz } = spectrum;
  const real = spectrum.real.slice();
  for (const { signal, fit } of fits) {
    if (!fit) continue;
    const area = finding.areaPerNucleus * signal.nuclei;
    const place = (firstPpm - fit.shiftPpm) / stepPpm;
    const reach = Math.ceil((60 * widthHz + Math.max(...signal.lines.map(({ offsetHz }) => Math.abs(offsetHz)))) / stepHz);
    const [from, to] = [Math.max(0, Math.round(place) - reach), Math.min(real.length, Math.round(place) + reach + 1)];
    const template = lorentzTemplate(to - from, place - from, signal.lines, widthHz, stepHz);
    for (let i = from; i < to; i += 1) real[i] = real[i]! - area * template[i - from]!;
  }
  return { ...spectrum, real };
}

function candidatesOf(method: Method): Candidate[] {
  const own = ownSolvent[method.solvent ?? ''];
  const listed = new Set(method.species.map(({ name }) => name.toLowerCase()));
  return solventLimits.flatMap(([name, cas]) => {
    if (cas === own || listed.has(name.toLowerCase())) return [];
    const rows = oneOfEachGroup(impurityShifts.filter((row) => row[1] === cas && row[5] === method.solvent && row[6] > 0));
    const signals = rows.flatMap(([, , group, multiplicity, couplings, , nuclei, shiftPpm]) => {
      if (/^(OH|NH|SH|COOH)/.test(group) || multiplicity.includes('br')) return [];
      const lines = linesOf(multiplicity, couplings);
      return lines ? [{ shiftPpm, nuclei, lines }] : [];
    });
    return signals.length > 0 ? [{ name, cas, signals }] : [];
  });
}

/** Several sources list the same group; rows that lie close with as many protons are one signal, the first source's. */
function oneOfEachGroup(rows: readonly ImpurityShift[]): ImpurityShift[] {
  return rows.filter(
    (row, index) => rows.findIndex((other) => other[6] === row[6] && Math.abs(other[7] - row[7]) < 0.04) === index,
  );
}

/** Lines of a published multiplicity; undefined for `m` and what cannot be read. */
function linesOf(multiplicity: string, couplings: string): readonly Line[] | undefined {
  const numbers = (couplings.match(/\d+(?:\.\d+)?/g) ?? []).map(Number);
  const pattern = parsePattern(multiplicity.trim(), numbers);
  if (!pattern.ok || pattern.value.isMultiplet) return undefined;
  const known = pattern.value.splittings.every(({ couplingHz, neighbours }) => neighbours === 0 || couplingHz !== undefined);
  return known ? firstOrderLines(pattern.value) : undefined;
}

type Fitted = readonly { readonly signal: Candidate['signals'][number]; readonly fit: TemplateFit | undefined }[];

function judge(
  candidate: Candidate,
  fits: Fitted,
  all: readonly { readonly candidate: Candidate; readonly fits: Fitted }[],
): SolventFinding {
  const usable = fits.flatMap(({ signal, fit }) =>
    fit ? [{ value: fit.area / signal.nuclei, u: fit.u / signal.nuclei, isCrowded: fit.isCrowded, signal }] : [],
  );
  const { name, cas } = candidate;
  if (usable.length === 0)
    return {
      name,
      cas,
      areaPerNucleus: 0,
      u: 0,
      u0: 0,
      evidence: 'not-detected',
      words: 'its signals lie outside the spectrum or under others',
    };
  const weight = usable.reduce((sum, { u }) => sum + u ** -2, 0);
  const mean = usable.reduce((sum, { value, u }) => sum + value * u ** -2, 0) / weight;
  const u0 = weight ** -0.5;
  const misfit = usable.reduce((sum, { value, u }) => sum + ((value - mean) / Math.hypot(u, 0.1 * mean)) ** 2, 0);
  const spread = usable.length > 1 ? Math.max(1, Math.sqrt(misfit / (usable.length - 1))) : 1;
  const base = { name, cas, areaPerNucleus: mean, u: u0 * spread, u0 };
  const isSeen = mean > foundFrom * u0 && mean > 2.5 * base.u;
  // What is too small at one of its own places is not this solvent, whatever stands at the others.
  const lacking = usable.find(({ value, u }) => value + 3 * u < 0.6 * mean);
  const clear = usable.filter(({ value, u, isCrowded }) => !isCrowded && value > 3 * u);
  if (!isSeen || lacking) {
    const least = lacking
      ? usable.reduce((low, entry) => (entry.value + 2 * entry.u < low.value + 2 * low.u ? entry : low))
      : undefined;
    const limited = least ? { ...base, areaPerNucleus: Math.max(0, least.value), u: least.u, u0: least.u } : base;
    return {
      ...limited,
      evidence: 'not-detected',
      words: lacking ? `something lies at one of its shifts, but not at ${lacking.signal.shiftPpm} ppm` : 'not detected',
    };
  }
  const rivals = sharing(candidate, all);
  const alone = clear.length === 1 ? clear[0]!.value / clear[0]!.u : 0;
  if (clear.length < 2 && (rivals.length > 0 || alone < aloneFrom)) {
    const why =
      rivals.length > 0
        ? `the line that shows it is shared with ${rivals.join(', ')}`
        : 'only a crowded or weak line suggests it';
    return { ...base, evidence: 'suggested', words: why };
  }
  return {
    ...base,
    evidence: 'found',
    words: `${clear.length} of ${candidate.signals.length} signals stand clear and in proportion`,
  };
}

/** Other candidates with a significant line at the only place of this one, that their other signals do not rule out. */
function sharing(candidate: Candidate, all: readonly { readonly candidate: Candidate; readonly fits: Fitted }[]): string[] {
  const place = candidate.signals[0]!.shiftPpm;
  return all.flatMap(({ candidate: other, fits }) => {
    if (other.cas === candidate.cas || !other.signals.some(({ shiftPpm }) => Math.abs(shiftPpm - place) < sharedPpm)) return [];
    const isPossible = fits.every(({ fit }) => fit === undefined || fit.area > 3 * fit.u);
    return isPossible ? [other.name] : [];
  });
}
