import { useMemo } from "react";
import { Link } from "react-router";
import { formatTick, niceScale, RateAxis, RateBar } from "~/ui";
import { type Column, DataTable } from "~/ui/data-table";
import { decimalsFor, formatCount, formatRate } from "../figures";
import type { RateUnit } from "../filters";
import { axisEnd, seriesOf } from "../picture";
import type { RateRow } from "../rates";

type Props = {
  caption: string;
  rows: RateRow[];
  /** Rows that stay below the others in any order: the total, the club. */
  totals: RateRow[];
  unit: RateUnit;
  sortParam?: string;
  /** The address of the records behind a row; a row of the whole club or of nothing has none. */
  recordsOf?: (row: RateRow) => string;
};

type Line = RateRow & { isTotal: boolean };

const gradeHeads = { recorded: "Recorded", headcount: "From headcounts", estimated: "Estimated" } as const;
/** A plain spot in a colour that no group has. */
const totalSeries = 5;
const dash = <span className="text-soft">–</span>;

/** A total sorts last in both directions: it has nothing to sort by. */
const sorts = (value: (row: RateRow) => string | number | null) => (line: Line) =>
  line.isTotal ? undefined : value(line);

/** Grades of exposure get columns of their own only where there is more than one. */
function gradeColumns(lines: readonly Line[], unit: RateUnit): Column<Line>[] {
  const grades = (["recorded", "headcount", "estimated"] as const).filter((grade) =>
    lines.some(({ exposure }) => (exposure?.[unit][grade] ?? 0) > 0),
  );
  if (grades.length < 2) return [];
  return grades.map((grade) => ({
    id: grade,
    header: gradeHeads[grade],
    numeric: true,
    value: sorts(({ exposure }) => exposure?.[unit][grade] ?? null),
    cell: ({ exposure }) => (exposure ? formatCount(exposure[unit][grade]) : dash),
  }));
}

function intervalCell({ rate, reason }: RateRow, decimals: number) {
  if (!rate) return <span className="text-soft">{reason}</span>;
  return (
    <span className="whitespace-nowrap">
      {formatRate(rate.lower, decimals)} to {formatRate(rate.upper, decimals)}
    </span>
  );
}

/** The count of a row, with the way to the injuries behind it. */
function countCell({ injuries, key, ...row }: Line, recordsOf: Props["recordsOf"]) {
  if (injuries === null) return dash;
  const text = formatCount(injuries);
  if (!recordsOf || row.isTotal || injuries === 0) return text;
  return (
    <Link
      to={recordsOf({ injuries, key, ...row })}
      aria-label={`${text}: the injuries of ${row.label}`}
      className="text-ink underline decoration-line underline-offset-4"
    >
      {text}
    </Link>
  );
}

function columnsOf(lines: readonly Line[], unit: RateUnit, recordsOf: Props["recordsOf"]): Column<Line>[] {
  const decimals = decimalsFor(lines.flatMap(({ rate }) => rate?.estimate ?? []));
  const scale = niceScale(axisEnd(lines), 4);
  const unitWords = unit === "aes" ? "per 1000 athlete-exposures" : "per 1000 hours";
  const grades = gradeColumns(lines, unit);
  const onlyRecorded =
    grades.length === 0 && lines.some(({ exposure }) => (exposure?.[unit].recorded ?? 0) > 0);
  const name = unit === "aes" ? "Exposures" : "Hours";
  return [
    {
      id: "group",
      header: "Group",
      rowHeader: true,
      value: sorts(({ label }) => label),
      cell: ({ label, isTotal }) => (isTotal ? <span className="font-medium">{label}</span> : label),
    },
    {
      id: "injuries",
      header: "Injuries",
      numeric: true,
      value: sorts(({ injuries }) => injuries),
      cell: (line) => countCell(line, recordsOf),
    },
    {
      id: "exposure",
      header: onlyRecorded ? `${name}, recorded` : name,
      numeric: true,
      value: sorts(({ denominator }) => denominator),
      cell: ({ denominator }) => (denominator ? formatCount(denominator) : dash),
    },
    ...grades,
    {
      id: "rate",
      header: "Rate",
      numeric: true,
      value: sorts(({ rate }) => rate?.estimate ?? null),
      cell: ({ rate }) => (rate ? formatRate(rate.estimate, decimals) : dash),
    },
    { id: "interval", header: "95 % interval, exact", cell: (line) => intervalCell(line, decimals) },
    {
      id: "bar",
      header: unitWords,
      axis: true,
      headerPicture: (
        <RateAxis scale={scale} label={`Rates ${unitWords}, from 0 to ${formatTick(scale.max)}`} />
      ),
      cell: (line) => (
        <div>
          {line.rate ? (
            <RateBar
              rate={line.rate}
              scale={scale}
              series={line.isTotal ? totalSeries : seriesOf(line)}
              unstable={line.unstable}
              decimals={decimals}
              unit={unitWords}
            />
          ) : null}
        </div>
      ),
    },
  ];
}

/** The same numbers as the picture, sortable, with their intervals on one axis. */
export function RatesTable({ caption, rows, totals, unit, sortParam, recordsOf }: Props) {
  const lines = useMemo(
    () => [
      ...rows.map((row): Line => ({ ...row, isTotal: false })),
      ...totals.map((row): Line => ({ ...row, isTotal: true })),
    ],
    [rows, totals],
  );
  const columns = useMemo(() => columnsOf(lines, unit, recordsOf), [lines, unit, recordsOf]);
  return (
    <DataTable
      caption={caption}
      columns={columns}
      rows={lines}
      rowKey={({ key, isTotal }) => (isTotal ? `total ${key}` : key)}
      empty="No exposure and no injuries yet."
      {...(sortParam ? { sortParam } : {})}
    />
  );
}
