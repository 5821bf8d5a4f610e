import { makeRandom, type Random } from '../../src/simulate/random.js';
import { type Call, type Fault, Killed, makeFaultyPort } from './faultyPort.js';
import { failures, lasting, ledgerOf, makeWorld, nightFiles, pass, verify, type World } from './world.js';

export interface RandomFigures {
  readonly rounds: number;
  readonly faults: number;
  readonly kills: number;
  readonly powerCuts: number;
  readonly lost: number;
  readonly duplicated: number;
  readonly differing: number;
  /** Each with the seed of its round, which repeats it. */
  readonly violations: readonly string[];
}

const codes = ['ENOSPC', 'EIO', 'EMFILE', 'EDQUOT', 'EACCES', 'EBUSY', 'ESTALE', 'EINTR'];

/**
 * Night after simulated night: several passes, each with faults at random calls of output disk and share, kills and power cuts;
 * then a quiet pass, and everything must be as if nothing had happened.
 */
export async function randomFaults(
  milliseconds: number,
  seed: number,
  roundsMax = Number.POSITIVE_INFINITY,
): Promise<RandomFigures> {
  const until = performance.now() + milliseconds;
  const figures = {
    rounds: 0,
    faults: 0,
    kills: 0,
    powerCuts: 0,
    lost: 0,
    duplicated: 0,
    differing: 0,
    violations: [] as string[],
  };
  const expected = new Map<number, Record<string, string>>();
  while (performance.now() < until && figures.rounds < roundsMax) {
    const roundSeed = seed + figures.rounds;
    figures.rounds += 1;
    const random = makeRandom(roundSeed);
    const count = 1 + Math.floor(random.uniform() * 5);
    if (!expected.has(count)) {
      const quiet = makeWorld(nightFiles(count));
      await pass(quiet);
      expected.set(count, lasting(quiet.disk));
    }
    await round(random, count, expected.get(count)!, figures, roundSeed);
  }
  return figures;
}

async function round(
  random: Random,
  count: number,
  expected: Record<string, string>,
  figures: { -readonly [K in keyof RandomFigures]: RandomFigures[K] } & { violations: string[] },
  seed: number,
): Promise<void> {
  const world = makeWorld(nightFiles(count));
  const say = (what: string) => void figures.violations.push(`seed ${seed}: ${what}`);
  const acknowledged = new Set<string>();
  const passes = 1 + Math.floor(random.uniform() * 4);
  for (let turn = 0; turn < passes; turn += 1) {
    const rate = random.uniform() * 0.05;
    const plan = (call: Call): Fault | undefined => {
      if (random.uniform() > rate) return undefined;
      figures.faults += 1;
      return someFault(random, call);
    };
    const sharePlan = (): Fault | undefined => {
      if (random.uniform() > rate) return undefined;
      figures.faults += 1;
      return { kind: 'fail', code: codes[Math.floor(random.uniform() * codes.length)]! };
    };
    const killed = await passWith(world, plan, sharePlan, say);
    for (const { kind, file } of world.events) if (kind === 'taken') acknowledged.add(file!);
    if (!killed) continue;
    figures.kills += 1;
    if (random.uniform() < 0.5) {
      figures.powerCuts += 1;
      world.disk = world.disk.afterPowerCut();
    }
  }
  await judge(world, acknowledged, expected, figures, say);
}

function someFault(random: Random, { operation }: Call): Fault {
  const kind = random.uniform();
  if (kind < 0.25) return { kind: 'kill', when: random.uniform() < 0.5 ? 'before' : 'after' };
  if (operation === 'write' && kind < 0.5)
    return { kind: 'short', bytes: Math.floor(random.uniform() * 300), ...(random.uniform() < 0.7 ? { code: 'ENOSPC' } : {}) };
  if (operation === 'write' && kind < 0.6) return { kind: 'lie', lost: 1 + Math.floor(random.uniform() * 50) };
  return { kind: 'fail', code: codes[Math.floor(random.uniform() * codes.length)]! };
}

async function passWith(
  world: World,
  plan: (call: Call) => Fault | undefined,
  sharePlan: () => Fault | undefined,
  say: (what: string) => void,
): Promise<boolean> {
  try {
    await pass(world, { port: makeFaultyPort(world.disk.port, plan), sharePort: makeFaultyPort(world.disk.port, sharePlan) });
    return false;
  } catch (cause) {
    if (!(cause instanceof Killed)) say(`thrown: ${String(cause)}`);
    return true;
  }
}

async function judge(
  world: World,
  acknowledged: ReadonlySet<string>,
  expected: Record<string, string>,
  figures: { lost: number; duplicated: number; differing: number },
  say: (what: string) => void,
): Promise<void> {
  const last = await pass(world);
  if (!last.ok || last.value.problems.length > 0)
    say(`the quiet pass fails: ${JSON.stringify(last.ok ? last.value.problems : last.problem)}`);
  const measured = ledgerOf(world)
    .filter(({ kind, state }) => kind === 'input' && state === 'measured')
    .map(({ file }) => file as string);
  const lost = [...acknowledged].filter((file) => !measured.includes(file)).length;
  const duplicated = measured.length - new Set(measured).size;
  const now = lasting(world.disk);
  const differing = Object.keys({ ...now, ...expected }).filter((name) => now[name] !== expected[name]);
  figures.lost += lost;
  figures.duplicated += duplicated;
  figures.differing += differing.length;
  if (lost > 0) say(`${lost} acknowledged results lost`);
  if (duplicated > 0) say(`${duplicated} counted twice`);
  if (differing.length > 0) say(`other bytes: ${differing.join(', ')}`);
  for (const failure of failures(await verify(world))) say(failure);
}
