import {
  Attention,
  Interval,
  Lede,
  LinkRow,
  NoRate,
  niceScale,
  Page,
  Pager,
  RateAxis,
  RateBar,
  Region,
  TextLink,
} from "~/ui";
import { IntervalChart } from "~/ui/charts/interval-chart";
import { LineWithBand } from "~/ui/charts/line-with-band";
import { type Column, DataTable } from "~/ui/data-table";

type Row = {
  group: string;
  events: number;
  exposures: number;
  rate: { estimate: number; lower: number; upper: number } | null;
  series: 1 | 2;
};

const rows: Row[] = [
  {
    group: "Girls, 15 to 16",
    events: 18,
    exposures: 4090,
    rate: { estimate: 4.4, lower: 2.6, upper: 7 },
    series: 1,
  },
  {
    group: "Boys, 15 to 16",
    events: 13,
    exposures: 5905,
    rate: { estimate: 2.2, lower: 1.2, upper: 3.8 },
    series: 2,
  },
  {
    group: "Girls, 19 to 25",
    events: 3,
    exposures: 1112,
    rate: { estimate: 2.7, lower: 0.6, upper: 7.9 },
    series: 1,
  },
  { group: "Boys, 19 to 25", events: 0, exposures: 0, rate: null, series: 2 },
];
const scale = niceScale(7.9);

const columns: Column<Row>[] = [
  { id: "group", header: "Group", value: (row) => row.group, rowHeader: true },
  { id: "events", header: "Injuries", value: (row) => row.events, numeric: true },
  {
    id: "exposures",
    header: "Exposures",
    value: (row) => row.exposures,
    cell: (row) => row.exposures.toLocaleString("en-GB"),
    numeric: true,
  },
  {
    id: "rate",
    header: "Rate",
    value: (row) => row.rate?.estimate,
    cell: (row) => row.rate?.estimate.toFixed(1) ?? "–",
    numeric: true,
  },
  {
    id: "interval",
    header: "95 % interval",
    cell: (row) =>
      row.rate ? (
        `${row.rate.lower.toFixed(1)} to ${row.rate.upper.toFixed(1)}`
      ) : (
        <NoRate reason="no exposure" />
      ),
  },
  {
    id: "picture",
    header: "Picture",
    headerPicture: <RateAxis scale={scale} label="Rate with its interval" />,
    axis: true,
    cell: (row) => (
      <RateBar
        rate={row.rate}
        reason="no exposure"
        scale={scale}
        series={row.series}
        unstable={row.events < 5}
        unit="per 1000"
      />
    ),
  },
];

const rate = (estimate: number, lower: number, upper: number) => ({ estimate, lower, upper });
const groups = [
  {
    label: "13 to 14",
    points: [
      { series: 1 as const, label: "girls", rate: rate(2.2, 0.8, 4.4) },
      { series: 2 as const, label: "boys", rate: rate(1.6, 0.5, 3.2) },
    ],
  },
  {
    label: "15 to 16",
    points: [
      { series: 1 as const, label: "girls", rate: rate(4.4, 2.6, 7) },
      { series: 2 as const, label: "boys", rate: rate(2.2, 1.2, 3.8) },
    ],
  },
  {
    label: "17 to 18",
    points: [
      { series: 1 as const, label: "girls", rate: rate(4.5, 2.4, 9.8) },
      { series: 2 as const, label: "boys", rate: null, note: "no exposure recorded" },
    ],
  },
  {
    label: "19 to 25",
    points: [
      {
        series: 1 as const,
        label: "girls",
        rate: rate(2.7, 1.1, 7.9),
        unstable: true,
        note: "3 injuries: unstable",
      },
      {
        series: 2 as const,
        label: "boys",
        rate: rate(1.6, 0.2, 5.7),
        unstable: true,
        note: "2 injuries: unstable",
      },
    ],
  },
];
const months = ["Aug", "Sep", "Oct", "Nov", "Dec", "Jan", "Feb", "Mar", "Apr", "May"];

/** A page of figures: sentence, picture, table. */
export function Figures() {
  return (
    <Page>
      <p className="mb-6 text-soft">
        Showing{" "}
        <a href="#case" className="editable-word">
          all injuries with time loss
        </a>{" "}
        in{" "}
        <a href="#kind" className="editable-word">
          training and matches
        </a>
        , per{" "}
        <a href="#per" className="editable-word">
          1000 athlete-exposures
        </a>
      </p>
      <Lede
        as="h1"
        note={
          <>
            91 % of held sessions have recorded exposure. <Attention>Two groups are unstable</Attention>:
            fewer than 5 injuries. Time loss of a day or more, training and matches.
          </>
        }
      >
        Girls had <strong>31 injuries in 9,840 exposures</strong>, <strong>3.2 per 1000</strong>{" "}
        <Interval lower="2.1" upper="4.5" />. That is <strong>1.6 times</strong> the boys' rate{" "}
        <Interval lower="0.98" upper="2.6" />; the interval includes no difference.
      </Lede>
      <Region>
        <IntervalChart
          groups={groups}
          unit="per 1000"
          title="Rates by age"
          reference={{ value: 2.5, label: "club 2.5" }}
        />
        <DataTable
          caption="Injuries with time loss per 1000 athlete-exposures, 2026/27"
          columns={columns}
          rows={rows}
          rowKey={(row) => row.group}
          empty="No group has exposure yet."
          defaultSort="-events"
          csvHref="/rates.csv"
        />
        <LinkRow>
          <TextLink to="/injuries">The 31 injuries behind it</TextLink>
          <TextLink to="/how">How this is computed</TextLink>
        </LinkRow>
      </Region>
      <Region heading="By month">
        <LineWithBand
          periods={months}
          unit="per 1000 athlete-exposures"
          title="Rates by month"
          reference={{ value: 2.5, label: "last season 2.5" }}
          series={[
            {
              series: 1,
              label: "girls",
              points: months.map((_, i) =>
                i === 4
                  ? null
                  : { ...rate(3 + Math.sin(i), 2 + Math.sin(i), 4.6 + Math.sin(i)), unstable: i === 8 },
              ),
            },
            {
              series: 2,
              label: "boys",
              points: months.map((_, i) =>
                rate(2 + Math.cos(i) / 2, 1.2 + Math.cos(i) / 2, 3.1 + Math.cos(i) / 2),
              ),
            },
          ]}
        />
        <Pager page={2} pageSize={20} total={312} what="athletes" />
      </Region>
    </Page>
  );
}
