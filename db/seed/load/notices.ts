import { hashToken, linkToken } from "~/features/accounts/tokens.server";
import { contentPlace } from "~/features/notices/composing.server";
import { answerText, type NoticeContent } from "~/features/notices/notice-content";
import { draftPlainWords, sayWhere } from "~/features/notices/plain-words";
import { eventPlace } from "~/features/notices/records.server";
import { masterKey } from "~/platform/crypto/keys.server";
import { keyedHash } from "~/platform/crypto/sealing.server";
import { deliveries, noticeEvents, noticeLinks, notices } from "~db/schema";
import type { Notice } from "../scenario/types";
import { byKey, find, insertRows, type Loading } from "./loading";

const linkDays = 14;

/** The notices of the last weeks with all that became of them. Every delivery is settled: nothing is left to send. */
export async function loadNotices(loading: Loading) {
  const { tx, own, organisationId, id, person, at, seals } = loading;
  const contentOf = contents(loading);
  const athletes = byKey(own.athletes);
  const guardians = byKey(own.guardians);
  const injuries = byKey(own.injuries);
  await insertRows(
    tx,
    notices,
    own.notices.map((notice) => {
      const row = id("notice", notice.key);
      const answer = answerText(row, find(athletes, notice.athlete).dateOfBirth);
      return {
        organisationId,
        id: row,
        injuryId: id("injury", notice.injury),
        athleteId: id("athlete", notice.athlete),
        guardianId: id("guardian", notice.guardian),
        urgency: notice.urgent ? "urgent" : "routine",
        language: find(guardians, notice.guardian).language,
        content: seals.sealRequired(contentPlace(row), JSON.stringify(contentOf(notice))),
        answerHash: keyedHash(masterKey(), "notice answer", answer),
        createdBy: person(find(injuries, notice.injury).loggedBy),
        createdAt: at(notice.sentAt),
      };
    }),
  );
  await insertRows(
    tx,
    noticeLinks,
    own.notices.map(({ key, sentAt }) => {
      const row = id("notice link", key);
      const expiresAt = new Date(at(sentAt).getTime() + linkDays * 24 * 3600 * 1000);
      return {
        organisationId,
        id: row,
        noticeId: id("notice", key),
        tokenHash: hashToken(linkToken("notice", row, expiresAt)),
        createdAt: at(sentAt),
        expiresAt,
      };
    }),
  );
  await insertRows(
    tx,
    deliveries,
    own.notices.map((notice) => ({
      organisationId,
      id: id("delivery", notice.key),
      template: "notice",
      noticeId: id("notice", notice.key),
      guardianId: id("guardian", notice.guardian),
      parameters: { linkId: id("notice link", notice.key) },
      state: notice.bouncedAt ? "bounced" : notice.deliveredAt ? "delivered" : "sent",
      attempts: 1,
      lastError: notice.bouncedAt ? "bounced" : null,
      createdAt: at(notice.sentAt),
      sentAt: at(notice.sentAt),
      deliveredAt: notice.deliveredAt ? at(notice.deliveredAt) : null,
      failedAt: notice.bouncedAt ? at(notice.bouncedAt) : null,
      urgent: notice.urgent,
    })),
  );
  await insertRows(
    tx,
    noticeEvents,
    own.notices.flatMap((notice) => {
      const by = person(find(injuries, notice.injury).loggedBy);
      return eventsOf(notice).map(({ kind, at: moment, detail }) => {
        const row = id("notice event", `${notice.key} ${kind}`);
        const isOurs = kind === "written" || kind === "phoned";
        return {
          organisationId,
          id: row,
          noticeId: id("notice", notice.key),
          kind,
          detail: seals.seal(eventPlace(row), detail),
          by: isOurs ? by : null,
          at: at(moment),
        };
      });
    }),
  );
}

type Event = { kind: string; at: string; detail?: string };

function eventsOf(notice: Notice): Event[] {
  const event = (kind: string, moment: string | null | undefined, detail?: string): Event[] =>
    moment ? [{ kind, at: moment, ...(detail ? { detail } : {}) }] : [];
  return [
    ...event("written", notice.sentAt),
    ...event("phoned", notice.call?.at, notice.call?.words),
    ...event("opened", notice.openedAt),
    ...event("acknowledged", notice.acknowledgedAt),
    ...event("call_requested", notice.callAskedAt),
  ];
}

/** What stands behind the link, drafted from the record as the athletic trainer would send it. */
function contents({ own }: Loading) {
  const athletes = byKey(own.athletes);
  const injuries = byKey(own.injuries);
  const sessions = byKey(own.sessions);
  const teams = byKey(own.teams);
  const venues = byKey(own.venues);
  const people = byKey(own.people);
  return (notice: Notice): NoticeContent => {
    const injury = find(injuries, notice.injury);
    const { givenName } = find(athletes, notice.athlete);
    const session = injury.session === null ? undefined : find(sessions, injury.session);
    const {
      area: bodyArea,
      side,
      signs,
      onset,
      contact,
      movement,
      couldContinue,
      suspectedConcussion,
    } = injury;
    const caller = find(people, injury.loggedBy);
    const words = draftPlainWords({
      givenName,
      bodyArea,
      side,
      signs,
      onset,
      contact,
      movement,
      couldContinue,
      suspectedConcussion,
      firstCare: [],
      referredTo: [],
    });
    return {
      childName: givenName,
      day: injury.at.slice(0, 10),
      time: injury.at.slice(11),
      where: sayWhere({
        outsideSport: injury.outsideOrganisedSport,
        kind: session?.kind ?? null,
        team: session ? find(teams, session.team).name : null,
        venue: session?.venue ? find(venues, session.venue).name : null,
      }),
      ...words,
      call: { name: `${caller.givenName} ${caller.familyName}`, phone: caller.phone, hours: null },
    };
  };
}
