import type { ImportKind } from "~db/schema/codes";
import {
  type ExposureColumn,
  type ExposureOptions,
  type ExposureRow,
  exposureColumns,
  exposureDayColumns,
  findMissingExposureColumns,
  isExposureHeading,
  mapExposureHeaders,
  parseExposureRow,
} from "~imports/exposure/definition";
import { ExposureDuplicateFinder } from "~imports/exposure/duplicates";
import {
  findMissingRosterColumns,
  isRosterHeading,
  mapRosterHeaders,
  parseRosterRow,
  type RosterColumn,
  type RosterOptions,
  type RosterRow,
  rosterColumns,
  rosterDayColumns,
} from "~imports/roster/definition";
import { RosterDuplicateFinder } from "~imports/roster/duplicates";
import type { DuplicateFinding, FileRow } from "./mapping/duplicates";
import type {
  ColumnDefinition,
  ColumnMapping,
  HeaderMapping,
  RememberedHeadings,
} from "./mapping/map-headers";
import type { RowResult } from "./mapping/read-row";

export type ImportRowValue = RosterRow | ExposureRow;
export type RowOptions = RosterOptions & ExposureOptions;
type Mapping = Record<string, number>;

/** What the steps of an import need to know of a kind, whatever the kind. Keys of columns are checked here. */
export type ImportDefinition = {
  columns: readonly ColumnDefinition[];
  dayColumns: readonly string[];
  /** The column that holds whole names, whose order may have to be asked for. */
  fullNameColumn: string;
  isHeading: (cell: string) => boolean;
  mapHeaders: (headers: readonly string[], remembered: RememberedHeadings<string>) => HeaderMapping<string>;
  findMissing: (mapping: Mapping, options: RowOptions) => string[];
  parseRow: (cells: readonly string[], mapping: Mapping, options: RowOptions) => RowResult<ImportRowValue>;
  duplicates: () => (row: FileRow<ImportRowValue>) => DuplicateFinding[];
};

function keepKnown<Key extends string>(
  entries: Record<string, unknown>,
  columns: readonly ColumnDefinition<Key>[],
) {
  const known = new Set<string>(columns.map(({ key }) => key));
  return Object.fromEntries(Object.entries(entries).filter(([key]) => known.has(key)));
}

function knownMapping<Key extends string>(mapping: Mapping, columns: readonly ColumnDefinition<Key>[]) {
  return keepKnown(mapping, columns) as ColumnMapping<Key>;
}

function knownHeadings<Key extends string>(
  remembered: RememberedHeadings<string>,
  columns: readonly ColumnDefinition<Key>[],
) {
  const known = new Set<string>(columns.map(({ key }) => key));
  const kept = Object.entries(remembered).filter(([, key]) => key === null || known.has(key));
  return Object.fromEntries(kept) as RememberedHeadings<Key>;
}

const roster: ImportDefinition = {
  columns: rosterColumns,
  dayColumns: rosterDayColumns,
  fullNameColumn: "fullName",
  isHeading: isRosterHeading,
  mapHeaders: (headers, remembered) =>
    mapRosterHeaders(headers, knownHeadings<RosterColumn>(remembered, rosterColumns)),
  findMissing: (mapping) => findMissingRosterColumns(knownMapping(mapping, rosterColumns)),
  parseRow: (cells, mapping, options) => parseRosterRow(cells, knownMapping(mapping, rosterColumns), options),
  duplicates: () => {
    const finder = new RosterDuplicateFinder();
    return ({ lineNumber, value }) => finder.add({ lineNumber, value: value as RosterRow });
  },
};

const exposure: ImportDefinition = {
  columns: exposureColumns,
  dayColumns: exposureDayColumns,
  fullNameColumn: "athleteName",
  isHeading: isExposureHeading,
  mapHeaders: (headers, remembered) =>
    mapExposureHeaders(headers, knownHeadings<ExposureColumn>(remembered, exposureColumns)),
  findMissing: (mapping, options) =>
    findMissingExposureColumns(knownMapping(mapping, exposureColumns), options),
  parseRow: (cells, mapping, options) =>
    parseExposureRow(cells, knownMapping(mapping, exposureColumns), options),
  duplicates: () => {
    const finder = new ExposureDuplicateFinder();
    return ({ lineNumber, value }) => finder.add({ lineNumber, value: value as ExposureRow });
  },
};

export const definitions: Record<ImportKind, ImportDefinition> = { roster, exposure };

/** The mapping of a definition from the headings a person confirmed. */
export function mappingOf(columns: Readonly<Record<string, string | null>>): Mapping {
  const mapping: Mapping = {};
  for (const [index, key] of Object.entries(columns)) if (key) mapping[key] = Number(index);
  return mapping;
}
