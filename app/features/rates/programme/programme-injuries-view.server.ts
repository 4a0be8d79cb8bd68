import { tertiles } from "~/statistics";
import type { Tx } from "~db/client.server";
import { percent } from "../coverage";
import type { RatesFilters } from "../filters";
import type { Counts, Selection } from "../selection";
import type { RatesView } from "../view.server";
import {
  classOf,
  contrast,
  type PlacedInjury,
  splitPlaced,
  type Third,
  tally,
  thirdOf,
  thirds,
  type WarmUpClass,
  warmUpClasses,
} from "./programme";
import {
  type Asked,
  type ExposureSums,
  enoughEarlier,
  placeInjuries,
  sumExposures,
  sumThirds,
} from "./programme.queries.server";
import { contrastPicture, type ShortNames } from "./programme-picture";
import { rateTable, ratioTable } from "./programme-tables";

/** Injuries of the primary outcome against athlete-exposures: warmed up and not, and by thirds of compliance. */

const classWords: Record<WarmUpClass, string> = {
  warmed_up: "Warmed up",
  not_warmed_up: "Not warmed up",
  not_recorded: "Warm-up not recorded",
};

const classNames: ShortNames = [
  ["warmed_up", "warmed up"],
  ["not_warmed_up", "not warmed up"],
];
const thirdNames: ShortNames = [
  ["lowest", "lowest third"],
  ["middle", "middle third"],
  ["highest", "highest third"],
];

type Given = {
  view: RatesView;
  filters: RatesFilters;
  counts: Counts;
  selection: Selection;
  /** The injuries counted, in words. */
  outcome: string;
};

export async function injuriesViewOf(tx: Tx, given: Given) {
  const { view, filters, counts, selection } = given;
  const range = { from: view.period.from, to: view.period.to, teamIds: view.teamIds };
  const silent = [
    ...new Map(counts.silent.map(({ teamId, day }) => [`${teamId} ${day}`, { teamId, day }])).values(),
  ];
  const asked: Asked = { range, filters, bands: counts.bands, silent };
  const sums = await sumExposures(tx, asked);
  const placed = splitPlaced(await placeCounted(tx, range, selection));
  const withheld =
    selection.coverage.state === "withheld"
      ? `withheld: only ${percent(selection.coverage.share ?? 0)} of held sessions recorded`
      : null;
  const shared = { ...given, ...placed, withheld };
  const classes = classesOf(sums, shared);
  const byThird = await thirdsOf(tx, asked, sums, shared);
  const outside = (which: string) =>
    sums.classes.reduce((sum, { place, aes }) => sum + (place === which ? aes : 0), 0);
  return {
    coverage: selection.coverage,
    withheld,
    counted: selection.counted.length,
    unplaced: placed.unplaced,
    outside: { beforeStart: outside("before_start"), noProgramme: outside("no_programme") },
    classes: classes.shown,
    thirds: byThird.shown,
    tables: { ...classes.tables, ...byThird.tables },
  };
}

/** The counted injuries with what the records say of the warm-ups behind them. */
async function placeCounted(
  tx: Tx,
  range: { from: string; to: string },
  { counted }: Selection,
): Promise<PlacedInjury[]> {
  const places = await placeInjuries(tx, range, counted);
  const byId = new Map(places.map((place) => [place.injuryId, place]));
  return counted.flatMap((injury) => {
    const place = byId.get(injury.id);
    return place ? [{ injury, place }] : [];
  });
}

type Shared = Given & ReturnType<typeof splitPlaced> & { withheld: string | null };

function classesOf(sums: ExposureSums, { placed, selection, outcome, withheld }: Shared) {
  const exposures = sums.classes.flatMap(({ teamId, kind, place, aes }) =>
    place === "before_start" || place === "no_programme" ? [] : [{ teamId, kind, group: place, aes }],
  );
  const tallies = tally(exposures, placed, ({ injury, place }) => classOf(place, injury.warmedUp));
  const compared = contrast(tallies, "warmed_up", "not_warmed_up");
  const differing = placed.filter(
    ({ injury, place }) => classOf(place, injury.warmedUp) !== place.byRecord,
  ).length;
  const byRecord =
    differing === 0
      ? null
      : contrast(
          tally(exposures, placed, ({ place }) => place.byRecord),
          "warmed_up",
          "not_warmed_up",
        );
  const rates = rateTable({
    outcome,
    coverage: selection.coverage,
    id: "warmed-up",
    caption: "Injuries per 1000 athlete-exposures, by whether the athlete had warmed up",
    head: "Athlete",
    groups: warmUpClasses,
    words: classWords,
    tallies,
  });
  return {
    shown: { contrast: compared, differing, byRecord, picture: contrastPicture(rates, classNames) },
    tables: {
      classes: rates,
      classRatios: ratioTable({
        id: "warmed-up-ratios",
        caption: "Rate after a warm-up over the rate without one",
        contrast: compared,
        byRecord,
        withheld,
        outcome,
      }),
    },
  };
}

const share = (value: number) => `${(value * 100).toFixed(value === 0 || value === 1 ? 0 : 1)} %`;

/** The words of each third with its cuts, which are stated wherever a third is shown. */
export function thirdWords([low, high]: readonly [number, number]): Record<Third, string> {
  return {
    lowest: `Lowest third: ${low === 0 ? "0 %" : `up to ${share(low)}`}`,
    middle: `Middle third: between ${share(low)} and ${share(high)}`,
    highest: `Highest third: ${high === 1 ? "100 %" : `${share(high)} or more`}`,
    early: `Too early: fewer than ${enoughEarlier} before`,
  };
}

/**
 * By thirds of compliance. Cuts lie so that a third of the athlete-exposures is on either side; equal shares stay together,
 * so that thirds may be unequal, and where both cuts are the same there are no thirds.
 */
async function thirdsOf(
  tx: Tx,
  asked: Asked,
  { shares }: ExposureSums,
  { placed, selection, outcome, withheld }: Shared,
) {
  const values = shares.flatMap(({ share: value, aes }) => Array<number>(aes).fill(value));
  const none = (reason: string) => ({
    shown: { contrast: null, words: null, reason, picture: null },
    tables: { thirds: null, thirdRatios: null },
  });
  if (values.length === 0)
    return none(
      `no athlete has ${enoughEarlier} earlier participations with a warm-up record since the programme began`,
    );
  const cuts = tertiles(values);
  if (cuts[0] === cuts[1])
    return none(
      `a third or more of the athlete-exposures have the same compliance (${share(cuts[0])}), so they cannot be parted in three`,
    );
  const rows = await sumThirds(tx, asked, cuts);
  const tallies = tally<Third>(
    rows.map(({ third, ...row }) => ({ ...row, group: third })),
    placed,
    ({ place }) => thirdOf(place, cuts, enoughEarlier),
  );
  const compared = contrast(tallies, "highest", "lowest");
  const words = thirdWords(cuts);
  const rates = rateTable({
    outcome,
    coverage: selection.coverage,
    id: "thirds",
    caption: "Injuries per 1000 athlete-exposures, by thirds of the athlete's own compliance until then",
    head: "Warmed up before, of recorded participations",
    groups: thirds,
    words,
    tallies,
  });
  return {
    shown: { contrast: compared, words, reason: null, picture: contrastPicture(rates, thirdNames) },
    tables: {
      thirds: rates,
      thirdRatios: ratioTable({
        id: "thirds-ratios",
        caption: "Rate of the highest third over that of the lowest",
        contrast: compared,
        withheld,
        outcome,
      }),
    },
  };
}
