import type { Problem } from '../base/result.js';
import type { Method } from './method.js';
import { nearestWord } from './nearestWord.js';
import type { YamlFile } from './readYaml.js';
import { referenceSubstances } from './referenceSubstances.js';
import type { MethodYaml } from './schema.js';

/** What only the whole method can tell: every name that is used exists, once, and what belongs together agrees. */
export function checkReferences(method: Method, file: YamlFile<MethodYaml>): Problem[] {
  return [
    ...checkUnique(method, file),
    ...checkReference(method, file),
    ...checkSpeciesNames(method, file),
    ...checkCoupled(method, file),
    ...checkStandard(method, file),
  ];
}

type File = YamlFile<MethodYaml>;

function checkUnique(method: Method, { at }: File): Problem[] {
  const ids = method.species.map(({ id }) => id);
  const twice = ids.flatMap((id, index) =>
    ids.indexOf(id) < index
      ? [at(['species', index, 'id'], 'id-twice', `found species id "${id}" a second time; expected each once`)]
      : [],
  );
  const signals = method.species.flatMap((species, place) => {
    const own = species.signals.map(({ id }) => id);
    return own.flatMap((id, index) =>
      own.indexOf(id) < index
        ? [
            at(
              ['species', place, 'signals', index, 'id'],
              'id-twice',
              `found signal id "${id}" a second time in "${species.id}"; expected each once`,
            ),
          ]
        : [],
    );
  });
  return [...twice, ...signals];
}

function checkReference(method: Method, { at }: File): Problem[] {
  const { signal, shiftPpm } = method.reference;
  const keys = method.species.flatMap(({ signals }) => signals.map(({ key }) => key));
  if (signal === 'solvent')
    return method.solvent === undefined
      ? [
          at(
            ['reference', 'signal'],
            'reference-unknown',
            'found "solvent", but the method names no solvent',
            'Add solvent: CDCl3 or the one you use.',
          ),
        ]
      : [];
  if (keys.includes(signal)) return [];
  if (Object.hasOwn(referenceSubstances, signal)) return [];
  const known = ['solvent', ...Object.keys(referenceSubstances), ...keys];
  const nearest = nearestWord(signal, known);
  const hint = nearest !== undefined ? `Did you mean "${nearest}"?` : `Known: ${known.slice(0, 12).join(', ')}.`;
  const free = shiftPpm !== undefined ? ' (a shift alone cannot name a line of the spectrum)' : '';
  return [
    at(
      ['reference', 'signal'],
      'reference-unknown',
      `found "${signal}"; expected a known reference substance, solvent, HDO or a <species>/<signal> of this method${free}`,
      hint,
    ),
  ];
}

function checkSpeciesNames(method: Method, { at }: File): Problem[] {
  const ids = method.species.map(({ id }) => id);
  const uses: readonly (readonly [readonly (string | number)[], string | undefined])[] = [
    [['conversion', 'of'], method.conversion?.of],
    [['conversion', 'to'], method.conversion?.to],
    [['purity', 'of'], method.purity?.of],
    [['residual_solvents', 'of'], method.residualSolvents?.of],
    ...method.limits.map(
      (limit, index) => [['limits', index, 'species'], limit.species === '' ? undefined : limit.species] as const,
    ),
  ];
  const unknown = uses.flatMap(([path, id]) => {
    if (id === undefined || ids.includes(id)) return [];
    const nearest = nearestWord(id, ids);
    return [
      at(
        path,
        'species-unknown',
        `found "${id}"; expected the id of a species of this method`,
        nearest !== undefined ? `Did you mean "${nearest}"?` : `Species: ${ids.join(', ')}.`,
      ),
    ];
  });
  const { conversion } = method;
  const same =
    conversion && conversion.of === conversion.to
      ? [at(['conversion', 'to'], 'conversion-same', `found "${conversion.to}" for both of and to; expected two species`)]
      : [];
  const empty = method.limits.flatMap((limit, index) => {
    const needsSpecies = limit.quantity === 'mole-fraction' || limit.quantity === 'mass-fraction';
    if (needsSpecies && limit.species === '')
      return [at(['limits', index], 'limit-species-missing', `a limit on ${limit.quantity} needs a species`)];
    return limit.atMost === undefined && limit.atLeast === undefined
      ? [at(['limits', index], 'limit-empty', 'the limit has neither at_most nor at_least')]
      : [];
  });
  return [...unknown, ...same, ...empty];
}

function checkCoupled(method: Method, { at }: File): Problem[] {
  return method.species.flatMap((species, place) =>
    species.signals.flatMap((signal, index) =>
      Object.entries(signal.coupled ?? {}).flatMap(([partnerId, couplingHz]) => {
        const path = ['species', place, 'signals', index, 'coupled', partnerId];
        const partner = species.signals.find(({ id }) => id === partnerId);
        if (!partner || partnerId === signal.id) {
          const others = species.signals.map(({ id }) => id).filter((id) => id !== signal.id);
          const nearest = nearestWord(partnerId, others);
          return [
            at(
              path,
              'coupled-unknown',
              `found "${partnerId}"; expected another signal id of "${species.id}"`,
              nearest !== undefined ? `Did you mean "${nearest}"?` : undefined,
            ),
          ];
        }
        const back = partner.coupled?.[signal.id];
        if (back === undefined || Math.abs(back - couplingHz) < 1e-9) return [];
        return [
          at(
            path,
            'coupled-differs',
            `found ${couplingHz} Hz here and ${back} Hz at "${partnerId}"; expected one value for one coupling`,
          ),
        ];
      }),
    ),
  );
}

function checkStandard(method: Method, { at }: File): Problem[] {
  return method.species.flatMap((species, index) => {
    if (species.role === 'internal-standard') return [];
    const keys = (['massFraction', 'concentrationMolPerL'] as const).filter((key) => species[key] !== undefined);
    const spelled = { massFraction: 'mass_fraction', concentrationMolPerL: 'concentration_mol_per_l' };
    return keys.map((key) =>
      at(
        ['species', index, spelled[key]],
        'standard-only',
        `"${spelled[key]}" belongs to a species of role internal-standard; "${species.id}" is ${species.role}`,
      ),
    );
  });
}
