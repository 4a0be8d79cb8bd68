import { useLocation } from "react-router";
import { Attention, Note, Region, TextLink } from "~/ui";
import { CoverageNote } from "../components/coverage-note";
import { SentenceParts } from "../components/sentence-parts";
import { searchWith } from "../views";
import { ProgrammeCompliance } from "./compliance-region";
import { ProgrammeContrast } from "./programme-contrast";
import { outcomeInWords, type Plan } from "./programme-plan";
import {
  leftOutLines,
  recordSentence,
  smallestSentence,
  thirdsWords,
  warmUpWords,
} from "./programme-sentence";
import type { ProgrammeResult } from "./programme-view.server";

type Props = { slug: string; plan: Plan; result: ProgrammeResult };

/** The plan's own case definition against that of the address. */
function OtherDefinition({ plan, result: { filters } }: Props) {
  const { search } = useLocation();
  if (filters.injuries === plan.caseDefinition) return null;
  return (
    <p className="mb-4 max-w-prose">
      <Attention>Not the plan's case definition.</Attention> The plan counts {outcomeInWords(plan)}; this view
      does not.{" "}
      <TextLink to={searchWith(search, { injuries: plan.caseDefinition })}>As the plan has it</TextLink>
    </p>
  );
}

function Warmed({ slug, result: { injuries } }: Props) {
  const { classes, withheld, tables } = injuries;
  return (
    <ProgrammeContrast
      slug={slug}
      heading="Injuries after a warm-up and without one"
      contrast={classes.contrast}
      reason={classes.contrast.reason}
      withheld={withheld}
      words={warmUpWords}
      picture={classes.picture}
      tables={[tables.classes, tables.classRatios]}
    >
      {classes.differing > 0 && !withheld ? (
        <p className="mb-4 max-w-prose">
          <SentenceParts parts={recordSentence(classes.differing, classes.byRecord)} />
        </p>
      ) : null}
    </ProgrammeContrast>
  );
}

function Thirds({ slug, result: { injuries } }: Props) {
  const { thirds, withheld, tables } = injuries;
  return (
    <ProgrammeContrast
      slug={slug}
      heading="Injuries by thirds of compliance"
      contrast={thirds.contrast}
      reason={thirds.reason ?? thirds.contrast?.reason ?? null}
      withheld={withheld}
      words={thirdsWords}
      picture={thirds.picture}
      tables={[tables.thirds, tables.thirdRatios]}
    >
      <p className="mb-4 max-w-prose text-soft">
        An athlete's compliance is the share of his or her own earlier trainings and matches of the season, of
        those with a warm-up record, in which he or she was warmed up. It is taken anew before the day of each
        exposure and of each onset, so that absence after an injury is not held against anybody. The cuts part
        the athlete-exposures in three.
      </p>
    </ProgrammeContrast>
  );
}

function Smallest({ result: { injuries } }: Props) {
  const { classes, thirds } = injuries;
  return (
    <Region heading="What this exposure could have shown">
      <p className="mb-3 max-w-prose">
        <SentenceParts
          parts={smallestSentence(classes.contrast.smallest, classes.contrast, [
            "warmed up",
            "not warmed up",
          ])}
        />
      </p>
      {thirds.contrast && (thirds.contrast.smallest || classes.contrast.smallest) ? (
        <p className="mb-3 max-w-prose">
          <strong>By thirds of compliance.</strong>{" "}
          <SentenceParts
            parts={smallestSentence(thirds.contrast.smallest, thirds.contrast, [
              "of the highest third",
              "of the lowest",
            ])}
          />
        </p>
      ) : null}
      <p className="max-w-prose text-soft">
        At the 95 % level, by the normal approximation. A smaller effect may be real and stay unseen, so an
        interval that includes no difference is no proof that the programme does nothing.
      </p>
    </Region>
  );
}

function LeftOut({ result: { injuries } }: Props) {
  const { unplaced, outside, classes } = injuries;
  const lines = leftOutLines(unplaced, outside, classes.contrast.withoutExposure);
  if (lines.length === 0) return null;
  return (
    <Region heading="What stands outside the comparison">
      <ul className="max-w-prose list-disc pl-6">
        {lines.map((line) => (
          <li key={line}>{line}</li>
        ))}
      </ul>
    </Region>
  );
}

/** Everything that follows from a plan. The comparison that the plan names comes first. */
export function ProgrammeResults(props: Props) {
  const { slug, plan, result } = props;
  const { injuries, compliance, outcome } = result;
  const comparisons = [<Warmed key="warmed-up" {...props} />, <Thirds key="thirds" {...props} />];
  return (
    <>
      <ProgrammeCompliance slug={slug} compliance={compliance} />
      <Region heading="Does it work?">
        <p className="mb-4 max-w-prose">
          The plan asks about <strong>{outcome}</strong>. There are <strong>{injuries.counted}</strong> in
          this view, held against athlete-exposures with recorded participations from the day each team began
          the programme.
        </p>
        <OtherDefinition {...props} />
        <CoverageNote coverage={injuries.coverage} />
        <Note kind="info">
          <p>
            This is not a randomised comparison: teams and athletes who warm up differ in other ways from
            those who do not, and that may explain a difference or hide one.
          </p>
        </Note>
      </Region>
      {plan.comparison === "thirds" ? [...comparisons].reverse() : comparisons}
      <Smallest {...props} />
      <LeftOut {...props} />
    </>
  );
}
