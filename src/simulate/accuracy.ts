import { accuracyTable, printTable } from './accuracyTable.js';
import { makeBedCase } from './testBed.js';
import { type BedScore, scoreBedCase } from './testBedScore.js';

/** `node accuracy.js [cases] [first seed]`: runs the test bed and prints each goal beside what was measured. */
function main(): void {
  const count = Number(process.argv[2] ?? 500);
  const firstSeed = Number(process.argv[3] ?? 1);
  const scores: BedScore[] = [];
  for (let seed = firstSeed; seed < firstSeed + count; seed += 1) scores.push(scoreBedCase(makeBedCase(seed)));
  if (process.argv[4] === 'cases') for (const score of scores) process.stdout.write(`${JSON.stringify(score)}\n`);
  process.stdout.write(`seeds ${firstSeed} to ${firstSeed + count - 1}\n${printTable(accuracyTable(scores))}`);
}

main();
