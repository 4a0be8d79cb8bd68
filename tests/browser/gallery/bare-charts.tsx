import { Region } from "~/ui";
import { BurdenChart } from "~/ui/charts/burden-chart";
import { ControlChart } from "~/ui/charts/control-chart";
import { FunnelChart } from "~/ui/charts/funnel-chart";
import { PeriodGrid } from "~/ui/charts/period-grid";
import { StepCurve } from "~/ui/charts/step-curve";
import { ThresholdChart } from "~/ui/charts/threshold-chart";
import { TwoSidedBars } from "~/ui/charts/two-sided-bars";

const centre = { value: 0, label: "club 0.0" };

/** Each chart with one figure or none. */
export function BareCharts() {
  return (
    <Region heading="With hardly any figures">
      <ControlChart
        periods={["4 Aug"]}
        points={[{ value: 2, lower: 0, upper: 9, signal: false, unstable: true }]}
        centre={{ value: 3, label: "last season 3.0" }}
        limitLabel="99.8 % limits"
        unit="per 1000"
        title="One week"
      />
      <ControlChart
        periods={[]}
        points={[]}
        centre={centre}
        limitLabel="99.8 % limits"
        unit="per 1000"
        title="No week"
      />
      <ThresholdChart
        periods={["4 Aug", "11 Aug"]}
        values={[null, null]}
        threshold={{ value: 4, label: "alarm at 4.0" }}
        crossings={[]}
        unit="cumulative sum"
        title="No sum"
      />
      <FunnelChart
        points={[{ label: "Women", exposure: 40, rate: 0, outside: false, unstable: true }]}
        centre={centre}
        limits={[]}
        xUnit="athlete-exposures"
        yUnit="per 1000"
        title="One team"
      />
      <StepCurve
        curves={[{ series: 1, label: "girls", steps: [], censored: [12] }]}
        start={1}
        xUnit="days since onset"
        yUnit="still away"
        title="Nobody back yet"
      />
      <BurdenChart
        points={[{ label: "ankle", x: 9, y: 1.2, events: 5 }]}
        curves={[{ value: 5, label: "5 days lost" }]}
        xUnit="median days lost"
        yUnit="per 1000"
        title="One area"
      />
      <TwoSidedBars
        rows={[{ label: "head", left: null, right: null, middle: { text: "without a side: 3" } }]}
        leftLabel="left"
        rightLabel="right"
        unit="per 1000"
        decimals={2}
        title="No side"
      />
      <PeriodGrid rows={[]} periods={[]} title="No team" emptyText="No session yet." />
    </Region>
  );
}
