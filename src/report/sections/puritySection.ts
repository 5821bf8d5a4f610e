import { budgetChart } from '../charts/budgetChart.js';
import { formatPercent, formatQuantity, formatU, formatValue, significant } from '../formatNumber.js';
import type { ReportInput } from '../reportInput.js';
import type { Block, Section } from '../reportModel.js';

/** Purity with its budget, residual solvents, unassigned signals. */
export function puritySection({ series, method }: ReportInput): Section {
  const last = series.points.findLast(({ status, amounts }) => status !== 'set-aside' && amounts !== undefined);
  const blocks: Block[] = [];
  const amounts = last?.amounts;
  if (amounts && last)
    blocks.push({ kind: 'text', text: `At ${last.file}, the last usable point:` }, amountsTable(amounts, method));
  if (amounts?.purity) blocks.push(...budgetBlocks(amounts.purity));
  else if (method.purity)
    blocks.push({
      kind: 'text',
      text: amounts?.flags.find(({ code }) => code === 'purity-not-stated')?.message ?? 'Purity not determined.',
    });
  if (amounts?.purityByNormalisation) {
    const { moleFraction, massFraction } = amounts.purityByNormalisation;
    const mass = massFraction ? `, by mass ${formatPercent(massFraction.value, massFraction.u)}` : '';
    blocks.push({
      kind: 'text',
      text: `By the 100 % method (what is not seen does not count): by mole ${formatPercent(moleFraction.value, moleFraction.u)}${mass}.`,
    });
  }
  if (amounts?.residualSolvents) blocks.push(...solventBlocks(amounts.residualSolvents));
  blocks.push(unassignedBlock(series));
  if (method.acquisition.relaxationDelayS === undefined || method.acquisition.pulseAngleDeg === undefined) {
    blocks.push({
      kind: 'text',
      tone: 'note',
      text: 'Full relaxation between scans is assumed: the method gives no relaxation delay with pulse angle and T1.',
    });
  }
  return { id: 'purity', heading: 'Amounts, purity and residual solvents', blocks };
}

type Amounts = NonNullable<ReportInput['series']['points'][number]['amounts']>;

function amountsTable(amounts: Amounts, method: ReportInput['method']): Block {
  const columns = [
    { head: 'species', align: 'left' as const, weight: 3 },
    { head: `amount / ${amounts.unit}`, align: 'right' as const, weight: 2 },
    { head: 'u', align: 'right' as const, weight: 1.4 },
    { head: 'mole fraction', align: 'right' as const, weight: 2 },
    { head: 'u', align: 'right' as const, weight: 1.4 },
    { head: 'detection limit', align: 'right' as const, weight: 1.6 },
    { head: 'remark', align: 'left' as const, weight: 2.4 },
  ];
  const rows = method.species.flatMap(({ id, name }) => {
    const entry = amounts.species[id];
    if (!entry) return [];
    const remark =
      entry.below === 'detection'
        ? 'below detection'
        : entry.below === 'quantitation'
          ? 'below quantitation'
          : (entry.agreement ?? 0) > 9
            ? 'its signals disagree'
            : '';
    return [
      [
        name,
        formatValue(entry.amount, entry.u),
        formatU(entry.u),
        entry.moleFraction !== undefined ? formatValue(entry.moleFraction, entry.moleFractionU) : '\u2013',
        formatU(entry.moleFractionU),
        entry.detection !== undefined ? significant(entry.detection, 2) : '\u2013',
        remark,
      ],
    ];
  });
  return {
    kind: 'table',
    caption: 'Amounts at the last usable point; limits by ICH Q2, 3.3 times the standard uncertainty at zero',
    columns,
    rows,
    small: true,
  };
}

function budgetBlocks(budget: NonNullable<Amounts['purity']>): Block[] {
  const columns = [
    { head: 'input', align: 'left' as const, weight: 3 },
    { head: 'value', align: 'right' as const, weight: 1.8 },
    { head: 'u', align: 'right' as const, weight: 1.4 },
    { head: 'unit', align: 'left' as const, weight: 1 },
    { head: 'sensitivity', align: 'right' as const, weight: 1.8 },
    { head: 'contribution / (g/g)', align: 'right' as const, weight: 2 },
  ];
  const rows = budget.lines.map(({ quantity, value, u, unit, sensitivity, contribution }) => [
    quantity,
    u > 0 ? formatValue(value, u) : significant(value, 6),
    formatU(u),
    unit,
    significant(sensitivity, 4),
    significant(contribution, 2),
  ]);
  const { result, coverageFactor, expandedU, effectiveDegreesOfFreedom } = budget;
  const freedom =
    effectiveDegreesOfFreedom !== undefined ? `, effective degrees of freedom ${Math.floor(effectiveDegreesOfFreedom)}` : '';
  return [
    { kind: 'table', caption: 'Uncertainty budget of the mass fraction (JCGM 100:2008)', columns, rows, small: true },
    {
      kind: 'text',
      text: `Mass fraction ${formatQuantity(result.value, result.u)} g/g; expanded uncertainty ${formatU(expandedU)} g/g (k = ${coverageFactor.toFixed(2)}${freedom}).`,
    },
    { kind: 'figure', title: 'Contributions to the uncertainty', ...budgetChart(budget) },
  ];
}

function solventBlocks(solvents: NonNullable<Amounts['residualSolvents']>): Block[] {
  const found = solvents.filter(({ verdict }) => verdict !== 'not-detected');
  const absent = solvents.filter(({ verdict }) => verdict === 'not-detected');
  const columns = [
    { head: 'solvent', align: 'left' as const, weight: 3 },
    { head: 'CAS', align: 'left' as const, weight: 1.6 },
    { head: 'class', align: 'right' as const, weight: 0.8 },
    { head: 'found / ppm', align: 'right' as const, weight: 1.6 },
    { head: 'u', align: 'right' as const, weight: 1 },
    { head: 'limit / ppm', align: 'right' as const, weight: 1.4 },
    { head: 'verdict', align: 'left' as const, weight: 1.6 },
  ];
  const rows = found.map(({ name, cas, class: solventClass, ppm, u, limitPpm, verdict }) => [
    name,
    cas,
    String(solventClass),
    formatValue(ppm, u),
    formatU(u),
    String(limitPpm),
    verdict,
  ]);
  const blocks: Block[] = [];
  if (rows.length > 0)
    blocks.push({ kind: 'table', caption: 'Residual solvents found, against ICH Q3C option 1', columns, rows, small: true });
  else blocks.push({ kind: 'text', text: 'No residual solvent of the table was found.' });
  const covered = absent.filter(({ detectablePpm, limitPpm }) => detectablePpm !== undefined && detectablePpm <= limitPpm);
  const blind = absent.filter(({ detectablePpm, limitPpm }) => detectablePpm === undefined || detectablePpm > limitPpm);
  const amount = ({ name, detectablePpm }: (typeof absent)[number]) =>
    `${name} (${detectablePpm !== undefined ? significant(detectablePpm, 2) : '?'})`;
  if (covered.length > 0)
    blocks.push({
      kind: 'text',
      text: `Not detected, detectable from the ppm in brackets on: ${covered.map(amount).join(', ')}.`,
    });
  if (blind.length > 0)
    blocks.push({
      kind: 'text',
      tone: 'note',
      text: `Not detected, but this spectrum could not have shown them down to their limits: ${blind.map(amount).join(', ')}.`,
    });
  return blocks;
}

function unassignedBlock({ unassignedLines = [], points }: ReportInput['series']): Block {
  if (unassignedLines.length > 0) return { kind: 'list', items: unassignedLines.map(({ words }) => `Unassigned: ${words}.`) };
  const last = points.findLast(({ record, status }) => record.measurement && status !== 'set-aside');
  const once = last?.record.measurement?.unassigned ?? [];
  if (once.length === 0) return { kind: 'text', text: 'No unassigned signal was seen in more than one point.' };
  return {
    kind: 'list',
    items: once.map(
      ({ shiftPpm, pattern, suggestion }) =>
        `Unassigned at the last point: ${pattern} at ${shiftPpm.toFixed(3)} ppm${suggestion !== undefined ? ` (${suggestion} lies there)` : ''}.`,
    ),
  };
}
