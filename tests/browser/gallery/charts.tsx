import { Page, Region } from "~/ui";
import { BurdenChart } from "~/ui/charts/burden-chart";
import { ControlChart } from "~/ui/charts/control-chart";
import { FunnelChart } from "~/ui/charts/funnel-chart";
import { IntervalChart } from "~/ui/charts/interval-chart";
import { LineWithBand } from "~/ui/charts/line-with-band";
import { PeriodGrid } from "~/ui/charts/period-grid";
import { StepCurve } from "~/ui/charts/step-curve";
import { ThresholdChart } from "~/ui/charts/threshold-chart";
import { TwoSidedBars } from "~/ui/charts/two-sided-bars";
import { BareCharts } from "./bare-charts";
import { bands, controlPoints, funnelLimits, funnelPoints, ratios, sums, weeks } from "./chart-data";
import { burdenCurves, burdenPoints, curves, gridPeriods, gridRows, sides } from "./chart-shapes-data";

/** Every chart, at its fullest and at its barest. */
export function Charts() {
  return (
    <Page>
      <Region heading="Week by week">
        <ControlChart
          periods={weeks}
          points={controlPoints}
          centre={{ value: 3.1, label: "last season 3.1" }}
          limitLabel="99.8 % limits"
          unit="injuries per 1000 athlete-exposures"
          title="Injuries per 1000 exposures by week with limits"
          caption="Injuries with time loss by week"
          gapNote="no exposure recorded"
        />
        <ControlChart
          periods={weeks.slice(0, 9)}
          points={controlPoints.slice(0, 9)}
          centre={{ value: 3.1, label: "last season 3.1" }}
          limitLabel="95 % limits"
          unit="per 1000"
          title="Nine weeks"
        />
        <ThresholdChart
          periods={weeks}
          values={sums}
          threshold={{ value: 4, label: "alarm at 4.0" }}
          crossings={[39, 50]}
          unit="cumulative sum"
          title="The running sum by week"
          caption="Running sum of what exceeds twice the expected"
        />
      </Region>
      <Region heading="Teams against the whole">
        <FunnelChart
          points={funnelPoints}
          centre={{ value: 3.1, label: "club 3.1" }}
          limits={funnelLimits}
          xUnit="athlete-exposures"
          yUnit="injuries per 1000 athlete-exposures"
          title="Rates of teams against their exposure"
          caption="Each team against what its exposure lets one expect"
        />
      </Region>
      <Region heading="Time">
        <StepCurve
          curves={curves}
          start={1}
          xUnit="days since onset"
          yUnit="still away from full participation"
          mark={{ y: 0.5, label: "half are back" }}
          title="Share still away by days since onset"
          caption="Time until return"
        />
        <BurdenChart
          points={burdenPoints}
          curves={burdenCurves}
          xUnit="median days lost per injury"
          yUnit="injuries per 1000 athlete-exposures"
          title="Severity against incidence by body area"
          caption="What is frequent and what is long"
        />
      </Region>
      <Region heading="Sides and weeks">
        <TwoSidedBars
          rows={sides}
          leftLabel="left"
          rightLabel="right"
          unit="injuries per 1000 athlete-exposures"
          decimals={2}
          title="Rates by body area, left and right"
          caption="Left and right"
        />
        <PeriodGrid
          rows={gridRows}
          periods={gridPeriods}
          title="Sessions with a warm-up by team and week"
          caption="Sessions with a warm-up"
          emptyText="No session yet."
        />
      </Region>
      <Region heading="Ratios, and long lines">
        <IntervalChart
          groups={ratios}
          unit="times the boys' rate"
          title="Girls' rates as multiples of the boys' rates"
          caption="Girls against boys"
          decimals={2}
          reference={{ value: 1, label: "no difference" }}
          logarithmic
        />
        <LineWithBand
          periods={weeks}
          series={bands}
          unit="injuries per 1000 athlete-exposures"
          title="Rates by week"
          caption="Sixty weeks, three groups"
          reference={{ value: 3.1, label: "last season 3.1" }}
        />
      </Region>
      <BareCharts />
    </Page>
  );
}
