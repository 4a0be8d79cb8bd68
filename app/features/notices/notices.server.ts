import { audit } from "~/platform/audit.server";
import { addDays, instantOf } from "~/platform/clock";
import { DomainError, forbidden, notFound } from "~/platform/errors";
import { once } from "~/platform/operations.server";
import { read, type Tx, write } from "~db/client.server";
import { findDisplayNames } from "../accounts/people.server";
import { may } from "../accounts/permissions";
import type { MemberScope } from "../accounts/scope.server";
import { lastListedDay, resolveViewing } from "../accounts/viewing.server";
import { openContent, toldNow } from "./composing.server";
import { shutLinks } from "./links.queries.server";
import { noticesSentence, noticeWay } from "./notice-state";
import {
  findDeliveries,
  findEvents,
  findInjuriesWithoutNotice,
  findNotice,
  findNoticeRow,
  findNotices,
  findNoticesOfInjury,
  findSender,
  findStanding,
  type NoticeRow,
} from "./notices.queries.server";
import type { CallOutcome } from "./notices.schema";
import { explainStop, whoIsTold } from "./recipients";
import { addLinkAndMail, openDetail, recordCall, statesOf } from "./records.server";
import { sayWhenIn } from "./when";

export const noticeFilters = ["all", "call", "open"] as const;
export type NoticeFilter = (typeof noticeFilters)[number];

export type NoticeLine = {
  id: string;
  injuryId: string;
  athleteId: string;
  athleteName: string;
  guardianName: string;
  relation: string;
  guardianPhone: string | null;
  urgent: boolean;
  createdAt: Date;
  state: Awaited<ReturnType<typeof statesOf>> extends Map<string, infer State> ? State : never;
};

async function linesOf(tx: Tx, rows: readonly NoticeRow[]): Promise<NoticeLine[]> {
  const states = await statesOf(tx, rows);
  return rows.flatMap((row) => {
    const state = states.get(row.id);
    if (!state) return [];
    const { id, injuryId, athleteId, athleteName, guardianName, guardianPhone, createdAt } = row;
    const relation = row.relation ?? "guardian";
    const urgent = row.urgency === "urgent";
    return [
      {
        id,
        injuryId,
        athleteId,
        athleteName,
        guardianName,
        relation,
        guardianPhone,
        urgent,
        createdAt,
        state,
      },
    ];
  });
}

/** The notices of the season and team in the address, newest first, with the sentence over them. */
export function listNotices(scope: MemberScope, url: URL, show: NoticeFilter) {
  if (!may(scope.roles, "notices.read")) throw forbidden();
  return read(scope, async (tx) => {
    const viewing = await resolveViewing(tx, url);
    const { season, team } = viewing;
    const lastDay = lastListedDay(viewing);
    const startOf = (day: string) => instantOf(scope.timeZone, day, "00:00");
    const rows = await findNotices(tx, {
      since: season ? startOf(season.startsOn) : new Date(0),
      ...(lastDay ? { until: startOf(addDays(lastDay, 1)) } : {}),
      ...(team ? { teamIds: [team.id] } : {}),
    });
    const lines = await linesOf(tx, rows);
    const sentence = noticesSentence(lines);
    const shown = {
      all: lines,
      call: lines.filter(({ state }) => state.phoneTask !== null),
      open: lines.filter(({ state }) => state.code !== "acknowledged" && state.code !== "phoned"),
    };
    return {
      sentence,
      lines: shown[show],
      counts: { all: lines.length, call: shown.call.length, open: shown.open.length },
      season: season?.name ?? null,
      team: team?.name ?? null,
    };
  });
}

const daysBack = (count: number) => new Date(Date.now() - count * 24 * 3600_000);

/**
 * For today's page: notices for which somebody should pick up the phone (unsent for an hour, come back, not
 * acknowledged in time, a call asked for), urgent ones first, of the last 30 days. Runs in the caller's transaction.
 */
export async function listNoticesNeedingAction(tx: Tx): Promise<NoticeLine[]> {
  const lines = await linesOf(tx, await findNotices(tx, { since: daysBack(30) }));
  return lines
    .filter(({ state }) => state.phoneTask !== null)
    .sort((a, b) => Number(b.urgent) - Number(a.urgent) || a.state.at.getTime() - b.state.at.getTime());
}

/**
 * For today's page: injuries recorded in the last days of which no guardian was told yet. Athletes who decide alone and
 * those under a safeguarding hold are left out. Runs in the caller's transaction.
 */
export async function listInjuriesWithoutNotice(tx: Tx, days = 7) {
  const rows = await findInjuriesWithoutNotice(tx, daysBack(days));
  const waiting: { injuryId: string; athleteId: string; athleteName: string; createdAt: Date }[] = [];
  const anyone = {
    endedAt: null,
    mayBeTold: true,
    limited: false,
    email: "",
    wantsEmail: true,
    emailStoppedAt: null,
  };
  for (const { dateOfBirth: _dateOfBirth, ...row } of rows) {
    const told = whoIsTold(await findStanding(tx, row.athleteId), anyone, tx.scope.today);
    if (told.way !== "nobody") waiting.push(row);
  }
  return waiting;
}

/** The notices of one injury with their states, for its page. Runs in the caller's transaction. */
export async function listNoticesOfInjury(tx: Tx, injuryId: string): Promise<NoticeLine[]> {
  return linesOf(tx, await findNoticesOfInjury(tx, injuryId));
}

/** A notice's page for the clinical roles: its way, its words, and whether it could be sent again now. */
export function readNotice(scope: MemberScope, id: string) {
  if (!may(scope.roles, "notices.read")) throw forbidden();
  return write(scope, async (tx) => {
    const row = await findNoticeRow(tx, id);
    const stored = row && (await findNotice(tx, id));
    if (!row || !stored) throw notFound("That notice");
    const [line] = await linesOf(tx, [row]);
    if (!line) throw notFound("That notice");
    const events = await findEvents(tx, [id]);
    const names = await findDisplayNames(tx, [...events.map(({ by }) => by), row.createdBy]);
    const told = [];
    for (const event of events) {
      const { kind, at, by } = event;
      told.push({ kind, at, by: names.get(by ?? "") ?? null, detail: await openDetail(tx, event) });
    }
    const siblings = (await listNoticesOfInjury(tx, row.injuryId)).filter((other) => other.id !== id);
    const { told: now } = await toldNow(tx, row);
    const { ownDecisionAge } = await findSender(tx);
    await audit(tx, { action: "notice.read", subjectId: id, athleteId: row.athleteId });
    const sayWhen = sayWhenIn(scope);
    return {
      line,
      content: await openContent(tx, stored),
      createdBy: names.get(row.createdBy ?? "") ?? null,
      way: noticeWay({ events: told, deliveries: await findDeliveries(tx, [id]) }).map((step) => ({
        ...step,
        when: sayWhen(step.at),
      })),
      siblings,
      mayResend: now.way === "email",
      whyNot: now.way === "email" ? null : explainStop(now.why, { athlete: row.givenName, ownDecisionAge }),
      mayPhone: now.way !== "nobody",
      operation: crypto.randomUUID(),
    };
  });
}

/** Sends a notice again with a new link; the links before it close. */
export function resendNotice(scope: MemberScope, id: string, operation: string) {
  if (!may(scope.roles, "notices.send")) throw forbidden();
  return write(scope, (tx) =>
    once(tx, operation, { resend: id }, async () => {
      const row = await findNoticeRow(tx, id);
      if (!row) throw notFound("That notice");
      const { told } = await toldNow(tx, row);
      const { ownDecisionAge, noticeLinkDays } = await findSender(tx);
      if (told.way !== "email")
        throw new DomainError(
          "conflict",
          `It can not be sent: ${explainStop(told.why, { athlete: row.givenName, ownDecisionAge })}`,
        );
      await shutLinks(tx, id);
      const deliveryId = await addLinkAndMail(tx, {
        noticeId: id,
        guardianId: row.guardianId,
        linkDays: noticeLinkDays,
        urgent: row.urgency === "urgent",
        template: "notice",
      });
      await audit(tx, { action: "notice.resend", subjectId: id, athleteId: row.athleteId });
      return { deliveryId };
    }),
  );
}

/** Puts a call about a notice on record: who was told what. */
export function logCall(
  scope: MemberScope,
  id: string,
  input: { operation: string; callOutcome: CallOutcome; callTold: string },
) {
  if (!may(scope.roles, "notices.send")) throw forbidden();
  return write(scope, (tx) =>
    once(tx, input.operation, { call: id, ...input }, async () => {
      const row = await findNoticeRow(tx, id);
      if (!row) throw notFound("That notice");
      await recordCall(tx, id, input);
      await audit(tx, {
        action: "notice.phone",
        subjectId: id,
        athleteId: row.athleteId,
        fields: { outcome: input.callOutcome },
      });
      return { id };
    }),
  );
}
