import packagedCdf from "@stdlib/stats-base-dists-gamma-cdf";
import packagedQuantile from "@stdlib/stats-base-dists-gamma-quantile";
import normalQuantile from "@stdlib/stats-base-dists-normal-quantile";

// The packaged distribution (gamma-cdf 0.3.1, gamma-quantile 0.2.3) stops its series early for x above 1000 and is
// then wrong in the third digit of a probability, which moved the upper limit of 1235 events in its fourth digit.
// Below that it agrees with references to 1e-12, so it serves there and these few lines serve above.
const packagedUpToX = 1000;
const packagedUpToShape = 500;

/**
 * Chance that a gamma variable of scale 1 is at most `x`; for a whole shape n that is the chance of n or more events
 * from a Poisson count of mean x. Large means use the lower series, whose terms are all positive.
 * Source: Abramowitz M, Stegun IA, Handbook of Mathematical Functions, 6.5.29.
 */
export function gammaProbability(x: number, shape: number) {
  if (x <= packagedUpToX) return packagedCdf(x, shape, 1);
  // Fifteen standard deviations: what is left is below e^-112 and lost in any 1 - something.
  if (shape < x - 15 * Math.sqrt(x)) return 1;
  let term = leadingTerm(x, shape);
  let sum = term;
  for (let k = 1; term > sum * 1e-17; k++) {
    term *= x / (shape + k);
    sum += term;
  }
  return Math.min(1, sum);
}

/**
 * Quantile of a gamma variable of scale 1. Large shapes start at the Wilson-Hilferty approximation, which is right
 * to six digits there, and take Newton steps.
 * Source: Wilson EB, Hilferty MM, PNAS 1931;17:684-688.
 */
export function gammaQuantile(p: number, shape: number) {
  if (shape <= packagedUpToShape) return packagedQuantile(p, shape, 1);
  const z = normalQuantile(p, 0, 1);
  let x = shape * (1 - 1 / (9 * shape) + z / (3 * Math.sqrt(shape))) ** 3;
  for (let step = 0; step < 20; step++) {
    const density = (leadingTerm(x, shape) * shape) / x;
    const change = (gammaProbability(x, shape) - p) / density;
    // Where p is so close to 0 or 1 that the density vanishes the approximation is all there is.
    if (!Number.isFinite(change)) break;
    x -= change;
    if (Math.abs(change) <= 1e-13 * x) break;
  }
  return x;
}

/** x^a e^-x / gamma(a + 1) for large a, by Stirling's formula around a so that nothing large cancels. */
function leadingTerm(x: number, a: number) {
  const away = (x - a) / a;
  const stirling = 1 / (12 * a) - 1 / (360 * a ** 3);
  return Math.exp(-a * (away - Math.log1p(away)) - stirling) / Math.sqrt(2 * Math.PI * a);
}
