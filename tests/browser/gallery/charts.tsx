import { Page, Region } from "~/ui";
import { ControlChart } from "~/ui/charts/control-chart";
import { controlPoints, weeks } from "./chart-data";

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
      </Region>
    </Page>
  );
}
