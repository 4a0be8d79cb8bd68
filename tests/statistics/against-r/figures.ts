import {
  ageOn,
  cusumReference,
  cusumRunLength,
  designEffect,
  gChart,
  limbSymmetryIndex,
  poissonCusum,
  quantile,
  severityBand,
  severityBands,
  tertiles,
  timeLoss,
  uChart,
} from "~/statistics";
import { type Comparison, comparison, type Draw, type Figures, rowsOf } from "./draw";

const day = (d: Draw, from: number, days: number) =>
  new Date(Date.UTC(from, 0, 1) + d.integer(0, days) * 86_400_000).toISOString().slice(0, 10);

const numbered = (name: string, values: readonly number[]): Figures =>
  Object.fromEntries(values.map((value, index) => [`${name}${index}`, value]));

export const figures: Comparison[] = [
  comparison(
    "uChart",
    (d) => {
      const exposure = d.list(d.integer(3, 12), () => d.real(50, 5000));
      return { exposure, events: exposure.map((value) => d.count(value, 4e-3, 2)) };
    },
    (input) => {
      const { centre, points } = uChart(rowsOf(input));
      return {
        centre,
        ...numbered(
          "lower",
          points.map(({ lower }) => lower),
        ),
        ...numbered(
          "upper",
          points.map(({ upper }) => upper),
        ),
      };
    },
  ),
  comparison(
    "gChart",
    (d) => ({ gaps: d.list(d.integer(2, 30), () => d.integer(0, 90)) }),
    ({ gaps }) => ({ centre: gChart(gaps).centre, upper: gChart(gaps).upper }),
  ),
  comparison(
    "poissonCusum",
    (d) => {
      const inControl = d.list(d.integer(4, 30), () => d.real(0.3, 6));
      return { inControl, counts: inControl.map((mean) => d.count(mean, 1, 2)), ratio: d.real(1.2, 3) };
    },
    ({ inControl, counts, ratio }) => {
      const reference = inControl.map((mean) =>
        cusumReference({ inControl: mean, outOfControl: ratio * mean }),
      );
      const { path, signalAt } = poissonCusum(counts, { reference, threshold: 4 });
      return { signalAt, ...numbered("path", path) };
    },
  ),
  comparison(
    "cusumRunLength",
    (d) => ({ mean: d.real(0.5, 6), reference: d.integer(1, 6), threshold: d.integer(0, 9) }),
    (input) => {
      const length = cusumRunLength(input);
      // Beyond this the linear equations are so nearly singular that neither program has six digits.
      if (length > 1e8) throw new RangeError("mean: must be nearer to the reference here");
      return { length };
    },
  ),
  comparison(
    "quantile",
    (d) => ({ values: d.list(d.integer(1, 60), () => d.real(0.01, 300)), p: d.integer(0, 100) / 100 }),
    ({ values, p }) => ({ quantile: quantile(values, p), ...numbered("tertile", tertiles(values)) }),
  ),
  comparison(
    "timeLoss",
    (d) => ({ days: [day(d, 2023, 700), day(d, 2023, 700)].sort() }),
    ({ days: [onset = "", fullOn = ""] }) => {
      const { days } = timeLoss({ onset, fullOn, asOf: "2026-12-31" });
      return { days, band: severityBands.indexOf(severityBand(days)) };
    },
  ),
  comparison(
    "ageOn",
    (d) => ({ born: d.pick([day(d, 2000, 6000), "2008-02-29"]), on: day(d, 2017, 3600) }),
    ({ born, on }) => ({ age: ageOn(born, on) }),
  ),
  comparison(
    "limbSymmetryIndex, designEffect",
    (d) => ({ injured: d.real(1, 300), uninjured: d.real(1, 300), size: d.integer(1, 40), icc: d.random() }),
    ({ injured, uninjured, size, icc }) => ({
      higher: limbSymmetryIndex({ injured, uninjured, better: "higher" }),
      lower: limbSymmetryIndex({ injured, uninjured, better: "lower" }),
      effect: designEffect({ clusterSize: size, intraclassCorrelation: icc }),
    }),
  ),
];
