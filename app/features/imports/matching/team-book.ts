import { foldText } from "~/platform/fold-text";
import type { Answers } from "../imports.schema";
import { quoteCell } from "../values/parsed";
import type { PendingWrites, RowProblem, TeamRecord } from "./records";

/** Finds the team that a row names, with what a person decided about the names nobody knew. */
export class TeamBook {
  private readonly byKey = new Map<string, TeamRecord>();
  private readonly byId = new Map<string, TeamRecord>();
  private readonly made = new Set<string>();
  private readonly answers: NonNullable<Answers["teams"]>;
  private readonly writes: PendingWrites;
  private readonly coversAll: boolean;

  constructor(
    teams: readonly TeamRecord[],
    answers: Answers["teams"],
    writes: PendingWrites,
    coversAll: boolean,
  ) {
    for (const team of teams) this.add(team);
    this.answers = answers ?? {};
    this.writes = writes;
    this.coversAll = coversAll;
  }

  /** How many teams the import makes so far. */
  get created() {
    return this.made.size;
  }

  name(id: string) {
    return this.byId.get(id)?.name ?? "";
  }

  resolve(name: string): { team: TeamRecord } | { problem: RowProblem } {
    const key = foldText(name);
    const known = this.byKey.get(key);
    if (known) return this.check(known, name);
    const answer = this.coversAll ? this.answers[key] : undefined;
    if (answer?.decision === "use") {
      const team = this.byId.get(answer.id);
      if (team) return this.check(team, name);
    }
    if (answer?.decision === "create") {
      const { decision: _, ...chosen } = answer;
      const team = { ...chosen, nameKey: key, archived: false, covered: true, version: 1 };
      this.add(team);
      this.made.add(team.id);
      this.writes.insert("teams", team);
      return { team };
    }
    if (answer?.decision === "leave") {
      return problem(
        name,
        "team.left-out",
        `The team ${quoteCell(name)} is left out, as you decided.`,
        "Nothing to do, or change your answer about this team.",
      );
    }
    if (!this.coversAll) return notOwn(name);
    return problem(
      name,
      "team.unknown",
      `There is no team ${quoteCell(name)}.`,
      "Correct the name, or say above what to do with this team.",
    );
  }

  private check(team: TeamRecord, name: string) {
    if (!team.covered) return notOwn(name);
    if (!team.archived) return { team };
    return problem(
      name,
      "team.archived",
      `The team ${quoteCell(name)} is archived.`,
      "Bring it back in the settings, or correct the name.",
    );
  }

  private add(team: TeamRecord) {
    this.byKey.set(team.nameKey, team);
    this.byId.set(team.id, team);
  }
}

function notOwn(name: string) {
  return problem(
    name,
    "team.not-own",
    `${quoteCell(name)} is not one of your teams.`,
    "Ask somebody who covers this team to import the row, or correct the name.",
  );
}

function problem(cell: string, code: string, reason: string, mend: string) {
  return { problem: { column: "Team", cell, code, reason, mend } };
}
