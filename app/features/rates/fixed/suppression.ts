/**
 * Small numbers outside the clinical roles (a board could recognise the one girl): counts below the organisation's
 * small number are hidden, with further cells so that none can be worked out from the total.
 */
export type CountCell = {
  key: string;
  /** Injuries counted. */
  events: number;
  /** Athletes exposed, and athletes injured: either may be the small number. */
  exposedAthletes: number;
  injuredAthletes: number;
};

export type Suppressed = {
  /** Keys of the cells to hide whole: count, exposure, rate and interval, since each gives the others away. */
  hidden: ReadonlySet<string>;
  /** The total is itself too small to show. */
  hideTotal: boolean;
};

/**
 * Chooses the cells of one table that are hidden. The cells add up to the total, which is shown beside them.
 * Every cell below `smallest` is hidden, a zero too, since "none" also tells of a person. With them always goes at
 * least one cell that is not small, and more until the hidden ones hold at least twice `smallest` injuries: a sum of
 * small cells alone is so bounded that it gives them away (4, 4 and 3 must be what adds up to 11). The cell that goes
 * along is the one with the fewest exposed athletes; its choice never depends on the injuries, or the choice itself
 * would narrow them down.
 *
 * Tables of different groupings share nothing but the total, so hiding within each is enough as long as no group
 * of one table is made up of groups of another (teams of sports, teams of sexes): such tables are not given out.
 * @param smallest counts below it are small, such as 5
 */
export function suppressSmallCells(cells: readonly CountCell[], smallest: number): Suppressed {
  const isSmall = (cell: CountCell) =>
    cell.events < smallest || cell.exposedAthletes < smallest || cell.injuredAthletes < smallest;
  const sum = (list: readonly CountCell[]) => list.reduce((all, { events }) => all + events, 0);
  const hidden = cells.filter(isSmall);
  const shown = cells
    .filter((cell) => !isSmall(cell))
    .sort((a, b) => a.exposedAthletes - b.exposedAthletes || (a.key < b.key ? -1 : 1));
  const small = hidden.length;
  const canBeWorkedOut = () => small > 0 && (hidden.length === small || sum(hidden) < 2 * smallest);
  while (canBeWorkedOut()) {
    const next = shown.shift();
    if (!next) break;
    hidden.push(next);
  }
  return {
    hidden: new Set(hidden.map(({ key }) => key)),
    // A single cell is the total.
    hideTotal: sum(cells) < smallest || (cells.length === 1 && hidden.length === 1),
  };
}
