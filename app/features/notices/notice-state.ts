import type { Spot } from "~/ui";
import { explainStop, isStopCode } from "./recipients";

/** What the pages know of one thing that happened to a notice; `detail` is opened text, where it may be shown. */
export type NoticeEventFact = { kind: string; at: Date; detail?: string | null; by?: string | null };
export type DeliveryFact = {
  template: string;
  state: string;
  createdAt: Date;
  sentAt: Date | null;
  deliveredAt: Date | null;
  failedAt: Date | null;
  lastError: string | null;
  attempts: number;
};

export type NoticeFactsOfState = {
  urgent: boolean;
  createdAt: Date;
  events: readonly NoticeEventFact[];
  deliveries: readonly DeliveryFact[];
};

export type NoticeStateCode =
  | "written"
  | "waiting"
  | "sent"
  | "delivered"
  | "opened"
  | "acknowledged"
  | "call_requested"
  | "bounced"
  | "failed"
  | "stopped"
  | "phoned";

export type NoticeState = {
  code: NoticeStateCode;
  /** When it came into this state. */
  at: Date;
  /** One line: the state and its time, as `sayWhen` writes instants. */
  line: string;
  spot: Spot;
  /** Why somebody should pick up the phone; null while nothing is to be done. */
  phoneTask: string | null;
};

const hourMs = 3600_000;
/** How long a mail may wait unsent before somebody phones (product.md: 1 h). */
export const unsentAfterMs = hourMs;
/** How long a family may leave a notice unacknowledged before somebody phones. */
export const unacknowledgedAfterMs = (urgent: boolean) => (urgent ? hourMs : 24 * hourMs);

const spots: Record<NoticeStateCode, Spot> = {
  written: "ring",
  waiting: "ring",
  sent: "ring",
  delivered: "half",
  opened: "half",
  acknowledged: "filled",
  phoned: "filled",
  call_requested: "half",
  bounced: "crossed",
  failed: "crossed",
  stopped: "crossed",
};

const latest = <T extends { at: Date }>(rows: readonly T[]) =>
  rows.reduce<T | undefined>((last, row) => (last && last.at > row.at ? last : row), undefined);

const newestDelivery = (rows: readonly DeliveryFact[]) =>
  rows.reduce<DeliveryFact | undefined>(
    (last, row) => (last && last.createdAt > row.createdAt ? last : row),
    undefined,
  );

/** Why a delivery was stopped when it was to be sent, in words for the clinical roles. */
export function stopWords(lastError: string | null, athlete = "the athlete", ownDecisionAge = 18): string {
  const code = lastError ?? "";
  return isStopCode(code)
    ? explainStop(code, { athlete, ownDecisionAge })
    : "The notice could not be sent any more.";
}

type Found = Pick<NoticeState, "code" | "at" | "line" | "phoneTask">;

function mailState(delivery: DeliveryFact, facts: NoticeFactsOfState, now: Date, sayWhen: SayWhen): Found {
  const { state, createdAt, sentAt, deliveredAt, failedAt, lastError } = delivery;
  const overdue = (since: Date) => now.getTime() - since.getTime() > unacknowledgedAfterMs(facts.urgent);
  const failed = failedAt ?? createdAt;
  switch (state) {
    case "sent": {
      const at = sentAt ?? createdAt;
      return {
        code: "sent",
        at,
        line: `Sent ${sayWhen(at)}, not delivered yet`,
        phoneTask: overdue(at) ? "Not acknowledged." : null,
      };
    }
    case "delivered": {
      const at = deliveredAt ?? sentAt ?? createdAt;
      return {
        code: "delivered",
        at,
        line: `Delivered ${sayWhen(at)}, not opened yet`,
        phoneTask: overdue(at) ? "Not opened." : null,
      };
    }
    case "bounced":
      return {
        code: "bounced",
        at: failed,
        line: `Came back ${sayWhen(failed)}: the address takes no mail`,
        phoneTask: "The e-mail came back.",
      };
    case "complained":
      return {
        code: "bounced",
        at: failed,
        line: `Marked as junk ${sayWhen(failed)}`,
        phoneTask: "The e-mail was marked as junk.",
      };
    case "failed":
      return {
        code: "failed",
        at: failed,
        line: `Not sent: given up ${sayWhen(failed)}`,
        phoneTask: "The e-mail could not be sent.",
      };
    case "stopped": {
      // Nobody is to be phoned either where the law or a hold says so.
      const nobody = ["withdrawn", "on_hold", "of_age", "ended", "limited", "not_to_be_told"].includes(
        lastError ?? "",
      );
      return {
        code: "stopped",
        at: createdAt,
        line: `Stopped before it was sent. ${stopWords(lastError)}`,
        phoneTask: nobody ? null : "The e-mail was stopped.",
      };
    }
    default: {
      const late = now.getTime() - createdAt.getTime() > unsentAfterMs;
      return {
        code: "waiting",
        at: createdAt,
        line: `Waiting to be sent since ${sayWhen(createdAt)}`,
        phoneTask: late ? "Unsent for more than 1 hour." : null,
      };
    }
  }
}

export type SayWhen = (at: Date) => string;

/**
 * The one line of a notice: what the family did counts before what the mail did, and a call before both.
 * @param sayWhen writes an instant in the organisation's clock, such as "today 14:03" or "3 Dec 14:03"
 */
export function noticeState(facts: NoticeFactsOfState, now: Date, sayWhen: SayWhen): NoticeState {
  const found = findState(facts, now, sayWhen);
  return { ...found, spot: spots[found.code] };
}

function findState(facts: NoticeFactsOfState, now: Date, sayWhen: SayWhen): Found {
  const of = (kind: string) => latest(facts.events.filter((event) => event.kind === kind));
  const [asked, phoned, acknowledged, opened] = [
    of("call_requested"),
    of("phoned"),
    of("acknowledged"),
    of("opened"),
  ];
  if (asked && !(phoned && phoned.at > asked.at))
    return {
      code: "call_requested",
      at: asked.at,
      line: `Asked for a call ${sayWhen(asked.at)}`,
      phoneTask: "Asks for a call.",
    };
  if (acknowledged)
    return {
      code: "acknowledged",
      at: acknowledged.at,
      line: `Acknowledged ${sayWhen(acknowledged.at)}`,
      phoneTask: null,
    };
  if (phoned)
    return { code: "phoned", at: phoned.at, line: `Told by phone ${sayWhen(phoned.at)}`, phoneTask: null };
  if (opened) {
    const late = now.getTime() - opened.at.getTime() > unacknowledgedAfterMs(facts.urgent);
    return {
      code: "opened",
      at: opened.at,
      line: `Opened ${sayWhen(opened.at)}, not acknowledged yet`,
      phoneTask: late ? "Opened, not acknowledged." : null,
    };
  }
  const delivery = newestDelivery(facts.deliveries);
  if (!delivery)
    return {
      code: "written",
      at: facts.createdAt,
      line: `Written ${sayWhen(facts.createdAt)}, by phone only`,
      phoneTask: "Is to be told by phone.",
    };
  return mailState(delivery, facts, now, sayWhen);
}

/** Whether the family has read it, or was told on the phone. */
export const hasHeard = ({ code }: Pick<NoticeState, "code">) =>
  code === "opened" || code === "acknowledged" || code === "phoned" || code === "call_requested";

export type WayStep = { at: Date; words: string; detail: string | null; trouble: boolean };

const eventWords: Record<string, string> = {
  written: "Written",
  opened: "Opened by the family",
  acknowledged: "Acknowledged",
  call_requested: "Asked for a call",
  phoned: "Told by phone",
  phone_tried: "Phoned, nobody answered",
  fresh_link_requested: "Asked for a new link",
  e_mail_stopped: "Stopped e-mails",
  locked: "Link locked after 5 wrong answers",
};
const troubled = ["phone_tried", "locked", "e_mail_stopped"];

/** Everything that happened to a notice, oldest first. */
export function noticeWay({
  events,
  deliveries,
}: Pick<NoticeFactsOfState, "events" | "deliveries">): WayStep[] {
  const steps: WayStep[] = events.map(({ kind, at, detail, by }) => ({
    at,
    words: `${eventWords[kind] ?? kind}${by ? ` (${by})` : ""}`,
    detail: detail ?? null,
    trouble: troubled.includes(kind),
  }));
  for (const delivery of deliveries) {
    const mail = delivery.template === "fresh-link" ? "New link" : "E-mail";
    const add = (at: Date | null, words: string, trouble = false, detail: string | null = null) => {
      if (at) steps.push({ at, words: `${mail} ${words}`, detail, trouble });
    };
    const again = delivery.attempts > 1 ? ` (tried ${delivery.attempts} times)` : "";
    if (delivery.state === "waiting" || delivery.state === "sending")
      add(delivery.createdAt, `waits to be sent${again}`);
    if (delivery.state === "stopped")
      add(delivery.createdAt, "stopped before it was sent", true, stopWords(delivery.lastError));
    add(delivery.sentAt, "sent");
    add(delivery.deliveredAt, "delivered");
    if (delivery.state === "bounced") add(delivery.failedAt, "came back", true);
    if (delivery.state === "complained") add(delivery.failedAt, "marked as junk", true);
    if (delivery.state === "failed") add(delivery.failedAt, `given up${again}`, true);
  }
  return steps.sort((a, b) => a.at.getTime() - b.at.getTime());
}

/**
 * The sentence over the list. A family is one injury's notices: it has opened once any of its guardians has. Calls are
 * counted per guardian, since each is to be phoned.
 */
export function noticesSentence(rows: readonly { injuryId: string; state: NoticeState }[]): string {
  if (rows.length === 0) return "No notice was written in this time.";
  const heard = new Set(rows.filter(({ state }) => hasHeard(state)).map(({ injuryId }) => injuryId));
  const unheard = new Set(rows.map(({ injuryId }) => injuryId).filter((id) => !heard.has(id))).size;
  const calls = rows.filter(({ state }) => state.phoneTask !== null).length;
  const opened =
    unheard === 0
      ? "Every family has opened a notice or was told by phone."
      : unheard === 1
        ? "1 family has not opened its notice."
        : `${unheard} families have not opened their notices.`;
  if (calls === 0) return `${opened} Nobody needs a call.`;
  return `${opened} ${calls === 1 ? "1 guardian needs a call." : `${calls} guardians need a call.`}`;
}
