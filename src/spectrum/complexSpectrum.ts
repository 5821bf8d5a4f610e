/** A complex spectrum on its way: index 0 is the lowest frequency, frequency of index i is (i - n/2) x stepHz from the centre. */
export interface ComplexSpectrum {
  /** shape (n) */
  readonly real: Float64Array;
  /** shape (n) */
  readonly imag: Float64Array;
  /** > 0 */
  readonly stepHz: number;
}
