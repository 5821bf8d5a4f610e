import { rmSync } from 'node:fs';
import { makeRandom } from '../../src/simulate/random.js';
import { hashTree, lastingIn, ledgerIn, makePlace, pause, putPoints, startDriver, verifyIn, watchOnceIn } from './processes.js';

export interface KillFigures {
  readonly kills: number;
  readonly endedBeforeKill: number;
  readonly lost: number;
  readonly duplicated: number;
  readonly differing: number;
  readonly verifyFailures: readonly string[];
  readonly shareChanged: boolean;
}

/**
 * Kills a watcher at random times while its share fills, starts it again, and compares the end with an undisturbed run.
 *
 * @param rounds how often it is killed
 * @param seed   decides every time
 */
export async function killRounds(rounds: number, seed: number): Promise<KillFigures> {
  const random = makeRandom(seed);
  const place = makePlace();
  const acknowledged = new Set<string>();
  let kills = 0;
  let endedBeforeKill = 0;
  let count = 0;
  try {
    for (let round = 0; round < rounds; round += 1) {
      const more = 1 + Math.floor(random.uniform() * 4);
      putPoints(place, count, count + more);
      count += more;
      const running = startDriver({ ...place, measureMs: Math.floor(random.uniform() * 30) });
      await pause(50 + random.uniform() * 750);
      if (running.child.exitCode === null && running.child.kill('SIGKILL')) kills += 1;
      const ended = await running.ended;
      if (ended.signal !== 'SIGKILL') endedBeforeKill += 1;
      for (const match of ended.stderr.matchAll(/^taken BX-0417\/(\S+)/gm)) acknowledged.add(match[1]!);
    }
    const share = hashTree(place.share);
    const last = await watchOnceIn(place);
    if (last.code !== 0) throw new Error(`the last pass ended with ${last.code}: ${last.stderr}`);
    const killed = lastingIn(place.out);
    const inputs = ledgerIn(place.out)
      .filter(({ kind }) => kind === 'input')
      .map(({ file }) => file as string);
    const verified = await verifyIn(place);
    const shareChanged = JSON.stringify(share) !== JSON.stringify(hashTree(place.share));
    rmSync(place.out, { recursive: true });
    await watchOnceIn(place);
    const quiet = lastingIn(place.out);
    const names = new Set([...Object.keys(killed), ...Object.keys(quiet)]);
    return {
      kills,
      endedBeforeKill,
      lost: [...acknowledged].filter((file) => !inputs.includes(file)).length + (count - new Set(inputs).size),
      duplicated: inputs.length - new Set(inputs).size,
      differing: [...names].filter((name) => killed[name] !== quiet[name]).length,
      verifyFailures: verified.failed,
      shareChanged,
    };
  } finally {
    place.remove();
  }
}
