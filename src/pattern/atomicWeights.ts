/** Standard atomic weight in g/mol and half the width of its stated range: an interval's half, or the digits in brackets. */
export interface AtomicWeight {
  readonly weight: number;
  readonly halfWidth: number;
}

const interval = (weight: number, low: number, high: number): AtomicWeight => ({ weight, halfWidth: (high - low) / 2 });
const stated = (weight: number, halfWidth: number): AtomicWeight => ({ weight, halfWidth });

/**
 * Standard atomic weights; for elements with an interval the conventional value stands beside it.
 *
 * @source IUPAC Commission on Isotopic Abundances and Atomic Weights, table of 2021 (from memory)
 */
export const atomicWeights: Readonly<Record<string, AtomicWeight>> = {
  H: interval(1.008, 1.00784, 1.00811),
  Li: interval(6.94, 6.938, 6.997),
  B: interval(10.81, 10.806, 10.821),
  C: interval(12.011, 12.0096, 12.0116),
  N: interval(14.007, 14.00643, 14.00728),
  O: interval(15.999, 15.99903, 15.99977),
  F: stated(18.998403162, 0.000000005),
  Na: stated(22.98976928, 0.00000002),
  Mg: interval(24.305, 24.304, 24.307),
  Al: stated(26.9815384, 0.0000003),
  Si: interval(28.085, 28.084, 28.086),
  P: stated(30.973761998, 0.000000005),
  S: interval(32.06, 32.059, 32.076),
  Cl: interval(35.45, 35.446, 35.457),
  K: stated(39.0983, 0.0001),
  Ca: stated(40.078, 0.004),
  Sc: stated(44.955907, 0.000004),
  Ti: stated(47.867, 0.001),
  V: stated(50.9415, 0.0001),
  Cr: stated(51.9961, 0.0006),
  Mn: stated(54.938043, 0.000002),
  Fe: stated(55.845, 0.002),
  Co: stated(58.933194, 0.000003),
  Ni: stated(58.6934, 0.0004),
  Cu: stated(63.546, 0.003),
  Zn: stated(65.38, 0.02),
  Ga: stated(69.723, 0.001),
  Ge: stated(72.63, 0.008),
  As: stated(74.921595, 0.000006),
  Se: stated(78.971, 0.008),
  Br: interval(79.904, 79.901, 79.907),
  Rb: stated(85.4678, 0.0003),
  Sr: stated(87.62, 0.01),
  Y: stated(88.905838, 0.000002),
  Zr: stated(91.224, 0.002),
  Mo: stated(95.95, 0.01),
  Ru: stated(101.07, 0.02),
  Rh: stated(102.90549, 0.00002),
  Pd: stated(106.42, 0.01),
  Ag: stated(107.8682, 0.0002),
  Cd: stated(112.414, 0.004),
  In: stated(114.818, 0.001),
  Sn: stated(118.71, 0.007),
  Sb: stated(121.76, 0.001),
  Te: stated(127.6, 0.03),
  I: stated(126.90447, 0.00003),
  Cs: stated(132.90545196, 0.00000006),
  Ba: stated(137.327, 0.007),
  La: stated(138.90547, 0.00007),
  Ce: stated(140.116, 0.001),
  W: stated(183.84, 0.01),
  Os: stated(190.23, 0.03),
  Ir: stated(192.217, 0.002),
  Pt: stated(195.084, 0.009),
  Au: stated(196.96657, 0.000004),
  Hg: stated(200.592, 0.003),
  Pb: stated(207.2, 1.1),
  Bi: stated(208.9804, 0.00001),
};

/** Atomic masses of the isotopes that labelled compounds name, g/mol. Their uncertainty does not matter beside the others. */
export const isotopeMasses: Readonly<Record<string, number>> = {
  '1H': 1.00782503,
  '2H': 2.01410178,
  '6Li': 6.01512289,
  '7Li': 7.01600343,
  '10B': 10.0129369,
  '11B': 11.0093054,
  '12C': 12,
  '13C': 13.0033548,
  '14N': 14.003074,
  '15N': 15.0001089,
  '16O': 15.9949146,
  '17O': 16.9991318,
  '18O': 17.9991596,
  '19F': 18.9984032,
  '31P': 30.973762,
};
