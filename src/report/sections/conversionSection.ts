import { conversionChart } from '../charts/conversionChart.js';
import { fractionsChart } from '../charts/fractionsChart.js';
import { massBalanceChart } from '../charts/massBalanceChart.js';
import { formatQuantity } from '../formatNumber.js';
import type { ReportInput } from '../reportInput.js';
import type { Block, Section } from '../reportModel.js';

/** Curve, law, forecast, fractions. */
export function conversionSection({ series, method }: ReportInput): Section {
  const blocks: Block[] = [];
  const conversion = conversionChart(series, method.conversion?.target);
  blocks.push({ kind: 'figure', title: 'Conversion against time', ...conversion });
  if (series.kinetics) {
    blocks.push({ kind: 'text', text: `Rate law: ${series.kinetics.words}.` });
    const rows = series.kinetics.fits.map(({ model, parameters, weight, aicc, runTestP }) => [
      model,
      Object.entries(parameters)
        .map(([name, { value, u }]) => `${name} ${formatQuantity(value, u)}`)
        .join('; '),
      weight.toFixed(3),
      aicc.toFixed(1),
      runTestP !== undefined ? runTestP.toFixed(2) : '',
    ]);
    const columns = [
      { head: 'law', align: 'left' as const, weight: 2.2 },
      { head: 'parameters (standard uncertainty)', align: 'left' as const, weight: 6 },
      { head: 'weight', align: 'right' as const, weight: 1 },
      { head: 'AICc', align: 'right' as const, weight: 1.2 },
      { head: 'runs p', align: 'right' as const, weight: 1 },
    ];
    blocks.push({
      kind: 'table',
      caption: 'Rate laws tried, with their Akaike weights and the runs test of the residuals',
      columns,
      rows,
      small: true,
    });
  }
  const fractions = fractionsChart(series, method);
  if (fractions) blocks.push({ kind: 'figure', title: 'Mole fractions against time', ...fractions });
  const balance = massBalanceChart(series);
  if (balance) blocks.push({ kind: 'figure', title: 'Mass balance against time', ...balance });
  return { id: 'conversion', heading: 'Conversion', blocks };
}
