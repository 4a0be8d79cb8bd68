import { Lede, LinkRow, Note } from "~/ui";
import { CoverageNote } from "../components/coverage-note";
import { HowComputed } from "../components/how-computed";
import { RatesTable } from "../components/rates-table";
import { percent } from "../coverage";
import { decimalsFor, formatCount } from "../figures";
import { fixedFilters } from "../filters";
import type { Rates } from "../rates";
import type { FixedTable } from "./fixed-tables";

type Props = {
  tables: FixedTable[];
  coverage: Rates["coverage"];
  season: string;
  csvHref: string;
  scopeName: string;
};

const captions: Record<FixedTable["by"], string> = { sex: "by sex", age: "by age band" };

/** The whole in a sentence, as far as it may be told. */
function Whole({ tables, scopeName }: Pick<Props, "tables" | "scopeName">) {
  const total = tables[0]?.total;
  if (!total?.rate)
    return (
      <>
        {scopeName} has no rate that can be shown: {total?.reason ?? "no exposure"}.
      </>
    );
  const { estimate, lower, upper } = total.rate;
  const decimals = decimalsFor([estimate]);
  return (
    <>
      {scopeName} had{" "}
      <strong>
        {formatCount(total.injuries ?? 0)} injuries in {formatCount(total.denominator ?? 0)} exposures
      </strong>
      , <strong>{estimate.toFixed(decimals)} per 1000</strong>{" "}
      <span className="whitespace-nowrap text-soft">
        ({lower.toFixed(decimals)} to {upper.toFixed(decimals)})
      </span>
      .
    </>
  );
}

/** Rates outside the clinical roles: fixed tables, small cells hidden. */
export function FixedRates({ tables, coverage, season, csvHref, scopeName }: Props) {
  const hidden = tables.reduce((sum, table) => sum + table.hidden, 0);
  const share =
    coverage.share === null ? "" : `${percent(coverage.share)} of held sessions have recorded exposure. `;
  return (
    <>
      <Lede note={`${share}Time loss of a day or more, training and matches.`}>
        <Whole tables={tables} scopeName={scopeName} />
      </Lede>
      <CoverageNote coverage={coverage} />
      {hidden > 0 ? (
        <Note title="Some groups are hidden">
          <p>
            Groups with few athletes or few injuries are hidden, with others that would give them away, so
            that nobody can be recognised.
          </p>
        </Note>
      ) : null}
      {tables.map(({ by, rows, total }) => (
        <RatesTable
          key={by}
          caption={`Injuries with time loss per 1000 athlete-exposures ${captions[by]}, ${season}`}
          rows={rows}
          totals={[total]}
          unit="aes"
          sortParam={`sort-${by}`}
        />
      ))}
      <LinkRow>
        <a href={csvHref} download className="text-lagoon underline underline-offset-4">
          Download these tables (CSV)
        </a>
      </LinkRow>
      <HowComputed filters={fixedFilters("sex")} />
    </>
  );
}
