import { Note } from "~/ui";
import { type Coverage, coverageFloor, coverageWarning, percent } from "../coverage";

/** The warning where too little of the exposure is recorded to trust a rate. */
export function CoverageNote({ coverage }: { coverage: Coverage }) {
  if (coverage.share === null || coverage.state === "good") return null;
  const counts = `${coverage.recorded.toLocaleString("en-GB")} of ${coverage.held.toLocaleString("en-GB")} held sessions (${percent(coverage.share)}) have recorded exposure`;
  if (coverage.state === "withheld")
    return (
      <Note kind="serious" title="Rates are withheld">
        <p>
          Only {counts}. Under {coverageFloor * 100} % a rate could mislead. Record who took part in the
          sessions, or import it, and the rates appear.
        </p>
      </Note>
    );
  return (
    <Note kind="attention" title="Read these rates with care">
      <p>
        {counts}. Under {coverageWarning * 100} % the sessions that are missing may differ from those
        recorded.
      </p>
    </Note>
  );
}
