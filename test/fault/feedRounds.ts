import { appendFileSync, mkdirSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { makeRandom, type Random } from '../../src/simulate/random.js';
import {
  hashTree,
  lastingIn,
  ledgerIn,
  makePlace,
  type Place,
  pause,
  pointText,
  startDriver,
  verifyIn,
  watchOnceIn,
} from './processes.js';

export interface FeedFigures {
  readonly points: number;
  readonly kills: number;
  readonly differing: number;
  readonly lost: number;
  readonly duplicated: number;
  readonly verifyFailures: readonly string[];
  readonly shareChanged: boolean;
}

/**
 * A night of a user: a writer that is slow, bursty and out of order feeds a share while the watcher is killed again and again;
 * at the end the series must be that of a quiet pass, byte for byte.
 */
export async function feedRounds(points: number, kills: number, seed: number, nightMs: number): Promise<FeedFigures> {
  const random = makeRandom(seed);
  const place = makePlace();
  try {
    mkdirSync(join(place.share, 'BX-0417'));
    const writer = writeNight(place, points, random, nightMs);
    const killed = await killDuring(place, kills, makeRandom(seed + 1), writer);
    const share = hashTree(place.share);
    await pause(1200);
    const last = await watchOnceIn(place);
    if (last.code !== 0) throw new Error(`the last pass ended with ${last.code}: ${last.stderr.slice(-2000)}`);
    const rough = lastingIn(place.out);
    const measured = ledgerIn(place.out)
      .filter(({ kind, state }) => kind === 'input' && state === 'measured')
      .map(({ file }) => file as string);
    const { failed } = await verifyIn(place);
    const shareChanged = JSON.stringify(share) !== JSON.stringify(hashTree(place.share));
    rmSync(place.out, { recursive: true });
    await watchOnceIn(place);
    const quiet = lastingIn(place.out);
    return {
      points,
      kills: killed,
      differing: Object.keys({ ...rough, ...quiet }).filter((name) => rough[name] !== quiet[name]).length,
      lost: points - new Set(measured).size,
      duplicated: measured.length - new Set(measured).size,
      verifyFailures: failed,
      shareChanged,
    };
  } finally {
    place.remove();
  }
}

/** Three files are written at a time, in pieces with pauses; the order of acquisition is not the order of writing. */
async function writeNight(place: Place, points: number, random: Random, nightMs: number): Promise<void> {
  const order = Array.from({ length: points }, (_, index) => index);
  for (let index = points - 1; index > 0; index -= 1) {
    const other = Math.max(0, index - Math.floor(random.uniform() * 12));
    [order[index], order[other]] = [order[other]!, order[index]!];
  }
  const meanMs = (3 * nightMs) / points;
  const write = async (): Promise<void> => {
    for (let index = order.shift(); index !== undefined; index = order.shift()) {
      const text = pointText(index);
      const path = join(place.share, 'BX-0417', `tp-${String(index).padStart(4, '0')}.jdx`);
      const isBurst = random.uniform() < 0.5;
      const pieces = isBurst ? 1 : 2 + Math.floor(random.uniform() * 4);
      for (let piece = 0; piece < pieces; piece += 1) {
        const from = Math.floor((piece * text.length) / pieces);
        appendFileSync(path, text.slice(from, Math.floor(((piece + 1) * text.length) / pieces)));
        if (!isBurst) await pause((2 * meanMs * random.uniform()) / pieces);
      }
      await pause(isBurst ? 0 : meanMs * random.uniform());
    }
  };
  await Promise.all([write(), write(), write()]);
}

/** Kills watchers until the writer has ended and the number is reached. */
async function killDuring(place: Place, kills: number, random: Random, writer: Promise<void>): Promise<number> {
  let isWriting = true;
  const ended = writer.then(() => {
    isWriting = false;
  });
  let killed = 0;
  while (isWriting || killed < kills) {
    const running = startDriver({
      ...place,
      once: false,
      settleMs: 150,
      pollMs: 60,
      measureMs: Math.floor(random.uniform() * 20),
    });
    await pause(250 + random.uniform() * 900);
    if (running.child.kill('SIGKILL')) killed += 1;
    await running.ended;
  }
  await ended;
  return killed;
}
