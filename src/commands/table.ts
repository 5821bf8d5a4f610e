import type { CommandModule } from 'yargs';
import { fail, ok, type Result } from '../base/result.js';

interface CommandEntry {
  readonly name: string;
  readonly does: string;
  readonly load: () => Promise<CommandModule>;
}

/** Every command with one line of what it does; loaded only when asked for. */
export const commandTable: readonly CommandEntry[] = [
  {
    name: 'watch',
    does: 'takes in every new time point of a share until stopped',
    load: async () => asModule((await import('./watch.js')).watchCommand),
  },
  {
    name: 'measure',
    does: 'measures files at once and prints the result; writes no record',
    load: async () => asModule((await import('./measure.js')).measureCommand),
  },
  {
    name: 'report',
    does: 'renders report.html and report.pdf again from the record alone',
    load: async () => asModule((await import('./report.js')).reportCommand),
  },
  {
    name: 'verify',
    does: 'checks a record and recomputes each number from the captured raw files',
    load: async () => asModule((await import('./verify.js')).verifyCommand),
  },
  {
    name: 'amend',
    does: 'adds a signed-off change to a record; never erases',
    load: async () => asModule((await import('./amend.js')).amendCommand),
  },
  {
    name: 'check',
    does: 'validates a method and prints the pattern each signal should show',
    load: async () => asModule((await import('./check.js')).checkCommand),
  },
  {
    name: 'draft',
    does: 'proposes a method from structures, listed data or a spectrum',
    load: async () => asModule((await import('./draft.js')).draftCommand),
  },
  {
    name: 'rehearse',
    does: 'simulates runs of a method: bias, precision, detection limits',
    load: async () => asModule((await import('./rehearse.js')).rehearseCommand),
  },
  {
    name: 'demo',
    does: 'follows the sample runs and says where the reports are',
    load: async () => asModule((await import('./demo.js')).demoCommand),
  },
  {
    name: 'doctor',
    does: 'checks share, output folder, clock, fonts and versions',
    load: async () => asModule((await import('./doctor.js')).doctorCommand),
  },
];

// yargs types a module by its own arguments; the table holds them all alike.
function asModule(command: unknown): CommandModule {
  return command as CommandModule;
}

/**
 * Finds a command by name; a typo gets the nearest name.
 *
 * @errors unknown-command
 */
export function findCommand(word: string): Result<CommandEntry> {
  const entry = commandTable.find(({ name }) => name === word);
  if (entry) return ok(entry);
  const nearest = commandTable
    .map(({ name }) => ({ name, distance: editDistance(word, name) }))
    .sort((a, b) => a.distance - b.distance)[0]!;
  const hint = nearest.distance <= 3 ? `Did you mean "${nearest.name}"?` : 'kinetrail without arguments lists the commands.';
  return fail({ code: 'unknown-command', area: 'usage', message: `unknown command "${word}"`, hint, retry: 'never' });
}

/** @source Levenshtein, Soviet Physics Doklady 1966, 10, 707 */
function editDistance(a: string, b: string): number {
  let previous = Array.from({ length: b.length + 1 }, (_, index) => index);
  for (let i = 1; i <= a.length; i += 1) {
    const current = [i];
    for (let j = 1; j <= b.length; j += 1) {
      const change = previous[j - 1]! + (a[i - 1] === b[j - 1] ? 0 : 1);
      current.push(Math.min(change, previous[j]! + 1, current[j - 1]! + 1));
    }
    previous = current;
  }
  return previous[b.length]!;
}
