import type { ArgumentsCamelCase, CommandModule } from 'yargs';
import { type Rehearsal, rehearseMethod } from '../simulate/rehearseMethod.js';
import { alignColumns } from './alignColumns.js';
import { exitCodes } from './exitCodes.js';
import { loadMethod } from './readInput.js';

interface RehearseArguments {
  method: string;
  at: number;
  signalToNoise: number;
  width: number;
  replicates: number;
  seed: number;
  json: boolean;
}

/** `rehearse <method>`: what the method would say of spectra whose truth is known. */
export const rehearseCommand: CommandModule<object, RehearseArguments> = {
  command: 'rehearse <method>',
  describe: 'Simulates runs of the method and reports bias, precision, detection and quantitation limits',
  builder: (yargs) =>
    yargs
      .positional('method', { describe: 'method file (YAML)', type: 'string', demandOption: true })
      .option('at', { describe: 'observe frequency, MHz', type: 'number', default: 400 })
      .option('signal-to-noise', { describe: 'of a one-nucleus singlet at unit amount', type: 'number', default: 200 })
      .option('width', { describe: 'full line width at half height, Hz', type: 'number', default: 1 })
      .option('replicates', { describe: 'simulated points at each level', type: 'number', default: 20 })
      .option('seed', { describe: 'the same seed gives the same numbers', type: 'number', default: 1 })
      .option('json', { describe: 'print one JSON object', type: 'boolean', default: false })
      .example('kinetrail rehearse method.yaml --at 60 --signal-to-noise 100', 'would a bench instrument do?') as never,
  handler: async (args) => {
    process.exitCode = await rehearse(args);
  },
};

async function rehearse(args: ArgumentsCamelCase<RehearseArguments>): Promise<number> {
  const wrong = (['at', 'signalToNoise', 'width', 'replicates'] as const).find(
    (key) => !(args[key] > 0 && Number.isFinite(args[key])),
  );
  if (wrong) {
    process.stderr.write(`error: --${wrong === 'signalToNoise' ? 'signal-to-noise' : wrong} must be a number above zero\n`);
    return exitCodes.usage;
  }
  const method = await loadMethod(args.method);
  if (!method.ok) return method.problem;
  const { at: observeMhz, signalToNoise, width: widthHz, replicates, seed } = args;
  const result = rehearseMethod(method.value, { observeMhz, signalToNoise, widthHz, replicates: Math.ceil(replicates), seed });
  process.stdout.write(
    args.json
      ? `${JSON.stringify({ format: 'kinetrail.rehearsal/1', ...result }, null, 2)}\n`
      : rehearsalText(method.value.title, result),
  );
  return exitCodes.done;
}

function rehearsalText(title: string, { settings, levels, limits }: Rehearsal): string {
  const { observeMhz, signalToNoise, widthHz, replicates, seed } = settings;
  const levelRows = levels.map((level) => [
    level.conversion.toFixed(2),
    level.bias.toExponential(1),
    level.spread.toExponential(1),
    level.statedU.toExponential(1),
    `${(100 * level.covered).toFixed(0)} %`,
    `${level.measured}/${level.points}`,
  ]);
  const limitRows = limits.map(({ signal, detection, quantitation }) => [
    signal,
    detection.toPrecision(2),
    quantitation.toPrecision(2),
  ]);
  return [
    `${title}: ${replicates} simulated points a level at ${observeMhz} MHz, signal-to-noise ${signalToNoise}, width ${widthHz} Hz, seed ${seed}`,
    '',
    ...alignColumns([['conversion', 'bias', 'spread', 'stated u', 'within 2 u', 'measured'], ...levelRows], [0, 1, 2, 3, 4, 5]),
    '',
    ...alignColumns([['signal', 'detection', 'quantitation  (mole per mole of unit amount)'], ...limitRows], [1]),
    '',
    '  Simulated spectra hold only what the method knows; a real sample may do worse.',
    '',
  ].join('\n');
}
