import type { Flag } from '../base/flag.js';
import { couplingNetwork } from './couplingNetwork.js';
import type { MethodSignal, MethodSpecies } from './method.js';
import { structureHints } from './structureHints.js';

/**
 * What is odd about the couplings of a species: named partners that the listing contradicts, partners that could be chosen in
 * more than one way, and neighbours in the structure whose listed couplings differ although a coupling has one size.
 *
 * @returns flags; all but the contradictions are remarks (weight `note`)
 * @source  the coupling between two groups is the same seen from either (common practice)
 */
export function couplingRemarks(species: MethodSpecies): Flag[] {
  const { contradictions, ambiguous } = couplingNetwork(species);
  const keyOf = (id: string) => species.signals.find((signal) => signal.id === id)!.key;
  return [
    ...contradictions.map(({ a, b, couplingHz }): Flag => {
      const message = `coupled: ${keyOf(a)} and ${keyOf(b)} with ${couplingHz} Hz does not agree with the patterns and counts listed for them; the listed patterns are used as they stand`;
      return { code: 'coupling-contradicted', message, signal: keyOf(a) };
    }),
    ...ambiguous.map((id): Flag => {
      const message = `${keyOf(id)} could couple to more than one signal; name its partner with \`coupled\` to have its pattern computed exactly`;
      return { code: 'coupling-ambiguous', message, signal: keyOf(id), weight: 'note' };
    }),
    ...unequalPairs(species),
  ];
}

function unequalPairs(species: MethodSpecies): Flag[] {
  const { signals } = species;
  const { couplings, ambiguous } = couplingNetwork(species);
  const hint = structureHints(species);
  const flags: Flag[] = [];
  for (const [a, left] of signals.entries()) {
    for (let b = a + 1; b < signals.length; b++) {
      const right = signals[b]!;
      const isKnown = couplings.some((one) => [one.a, one.b].includes(left.id) && [one.a, one.b].includes(right.id));
      if (isKnown || ambiguous.includes(left.id) || hint(a, b) !== 'neighbours') continue;
      const [here, there] = [listedFor(left, right.nuclei), listedFor(right, left.nuclei)];
      if (here === undefined || there === undefined) continue;
      const message = `${left.key} lists ${here} Hz and ${right.key} ${there} Hz, but they are neighbours and a coupling is the same seen from either; their patterns stay first order`;
      flags.push({ code: 'coupling-unequal', message, signal: left.key, weight: 'note' });
    }
  }
  return flags;
}

/** The one listed coupling that a partner of so many nuclei must explain. */
function listedFor(signal: MethodSignal, nuclei: number): number | undefined {
  const fitting = signal.pattern.splittings.filter(({ neighbours }) => neighbours === nuclei);
  return fitting.length === 1 ? fitting[0]!.couplingHz : undefined;
}
