import { describe, expect, it } from 'vitest';
import { type Call, type Fault, Killed, makeFaultyPort } from './faultyPort.js';
import { failures, lasting, ledgerOf, makeWorld, nightFiles, pass, verify } from './world.js';

const files = nightFiles(2);

/**
 * Cuts the power after every call and lists what then is wrong. `spoil` takes a safeguard away first: a harness that does not
 * notice is a harness that proves nothing.
 */
async function powerCutViolations(spoil: (call: Call) => Fault | undefined): Promise<string[]> {
  const quiet = makeWorld(files);
  await pass(quiet);
  const expected = JSON.stringify(lasting(quiet.disk));
  const violations = new Set<string>();
  for (let n = 1; ; n += 1) {
    const world = makeWorld(files);
    const port = makeFaultyPort(world.disk.port, (call) => (call.number === n ? { kind: 'kill', when: 'after' } : spoil(call)));
    const killed = await pass(world, { port }).then(
      () => false,
      (cause: unknown) => cause instanceof Killed,
    );
    if (!killed) break;
    const acknowledged = world.events.filter(({ kind }) => kind === 'taken').map(({ file }) => file);
    world.disk = world.disk.afterPowerCut();
    for (const [path, bytes] of world.disk.files('/out'))
      if (bytes.length === 0 && !path.includes('/.new-')) violations.add('an empty file under a final name');
    const kept = () => ledgerOf(world).map(({ file }) => file);
    if (acknowledged.some((file) => !kept().includes(file))) violations.add('an acknowledged result is lost');
    const again = await pass(world);
    if (!again.ok || again.value.problems.length > 0) violations.add('it does not recover');
    else if (JSON.stringify(lasting(world.disk)) !== expected) violations.add('other bytes at the end');
    if (failures(await verify(world)).length > 0) violations.add('verify fails');
  }
  return [...violations].sort();
}

const skipping =
  (fits: (call: Call) => boolean) =>
  (call: Call): Fault | undefined =>
    fits(call) ? { kind: 'skip' } : undefined;

const isLedger = ({ path }: Call) => path.endsWith('ledger.jsonl');

describe('the harness notices a safeguard that is missing', { timeout: 120_000 }, () => {
  it('with every safeguard in place nothing is wrong', async () => {
    expect(await powerCutViolations(() => undefined)).toEqual([]);
  });

  const removed: Record<string, (call: Call) => boolean> = {
    'the sync of a ledger line': (call) => call.operation === 'dataSync' && isLedger(call),
    'the sync of new files': ({ operation }) => operation === 'sync',
    'the sync of the folder of captured files': ({ operation, path }) => operation === 'syncFolder' && path.endsWith('/raw'),
    'the sync of the folder of point records': ({ operation, path }) => operation === 'syncFolder' && path.endsWith('/points'),
    'the sync of the run folder': ({ operation, path }) => operation === 'syncFolder' && path.endsWith('/BX-0417'),
    'the sync of the output folder': ({ operation, path }) => operation === 'syncFolder' && path === '/out',
    'the sync of the parent of the output folder': ({ operation, path }) => operation === 'syncFolder' && path === '/',
  };
  for (const [what, fits] of Object.entries(removed)) {
    it(`without ${what}`, async () => {
      expect(await powerCutViolations(skipping(fits))).not.toEqual([]);
    });
  }
});
