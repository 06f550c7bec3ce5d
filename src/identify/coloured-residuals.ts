/** Correlation past which a record has next to no independent samples. */
const MOST_CORRELATION = 0.995;

/**
 * How much less coloured residuals say than independent ones: residuals whose neighbours correlate by phi count as n (1 -
 * phi) / (1 + phi) samples when something slow is fitted to them (G. V. Bayley, J. M. Hammersley, J. Roy. Statist. Soc.
 * Suppl. 8 (1946) 184-197, from memory; a first-order Gauss-Markov noise in evenly spaced samples). Phi is widened by
 * (1 + 4 phi) / n for the mean and (1 + phi) / n for each other number that was fitted to the record, since fits eat the
 * slow part of their own residuals (M. G. Kendall, Biometrika 41 (1954) 403-404, for the mean; the rest in its likeness).
 *
 * @param residuals in order of time, more than `fitted`
 * @param fitted count of numbers that were fitted
 * @returns factor on variances, >= 1, and the number of independent samples
 */
export function colourOf(
  residuals: Float64Array,
  fitted: number,
): { readonly factor: number; readonly independent: number } {
  const count = residuals.length;
  let [products, squares] = [0, 0];
  for (let i = 0; i < count; i++) {
    squares += residuals[i]! * residuals[i]!;
    if (i > 0) products += residuals[i]! * residuals[i - 1]!;
  }
  const raw = squares > 0 ? products / squares : 0;
  const widened = raw + (1 + 4 * raw + (fitted - 1) * (1 + raw)) / count;
  const phi = Math.min(Math.max(widened, 0), MOST_CORRELATION);
  const factor = (1 + phi) / (1 - phi);
  return { factor, independent: count / factor };
}
