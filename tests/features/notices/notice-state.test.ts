import { describe, expect, it } from "vitest";
import { mailNameProblem } from "~/features/notices/mail-safe";
import {
  type DeliveryFact,
  type NoticeFactsOfState,
  noticeState,
  noticesSentence,
  noticeWay,
} from "~/features/notices/notice-state";
import { sayWhenIn } from "~/features/notices/when";

const at = (time: string) => new Date(`2026-12-01T${time}:00Z`);
const sayWhen = sayWhenIn({ timeZone: "Europe/London", today: "2026-12-01" });
const mail = (given: Partial<DeliveryFact> = {}): DeliveryFact => ({
  template: "notice",
  state: "waiting",
  createdAt: at("10:00"),
  sentAt: null,
  deliveredAt: null,
  failedAt: null,
  lastError: null,
  attempts: 1,
  ...given,
});
const state = (given: Partial<NoticeFactsOfState>, now = "10:30") =>
  noticeState(
    { urgent: false, createdAt: at("10:00"), events: [], deliveries: [], ...given },
    at(now),
    sayWhen,
  );

describe("the state of a notice", () => {
  it.each([
    ["waiting", mail(), "Waiting to be sent since today 10:00"],
    ["waiting", mail({ state: "sending" }), "Waiting to be sent since today 10:00"],
    ["sent", mail({ state: "sent", sentAt: at("10:01") }), "Sent today 10:01, not delivered yet"],
    [
      "delivered",
      mail({ state: "delivered", sentAt: at("10:01"), deliveredAt: at("10:02") }),
      "Delivered today 10:02, not opened yet",
    ],
  ] as const)("follows the mail: %s", (code, delivery, line) => {
    expect(state({ deliveries: [delivery] })).toMatchObject({ code, line, phoneTask: null });
  });

  it.each([
    ["bounced", mail({ state: "bounced", failedAt: at("10:02") })],
    ["bounced", mail({ state: "complained", failedAt: at("10:02") })],
    ["failed", mail({ state: "failed", failedAt: at("10:02") })],
    ["stopped", mail({ state: "stopped", lastError: "email_not_wanted" })],
  ] as const)("asks for a call at once when the mail can not arrive: %s", (code, delivery) => {
    const found = state({ deliveries: [delivery] });
    expect(found.code).toBe(code);
    expect(found.phoneTask).not.toBeNull();
  });

  it("asks nobody to phone where nobody may be told", () => {
    for (const lastError of ["on_hold", "of_age", "ended", "limited", "not_to_be_told"])
      expect(state({ deliveries: [mail({ state: "stopped", lastError })] }).phoneTask).toBeNull();
  });

  it("becomes a phone task when unsent for more than an hour", () => {
    expect(state({ deliveries: [mail()] }, "11:00").phoneTask).toBeNull();
    expect(state({ deliveries: [mail()] }, "11:01").phoneTask).toBe("Unsent for more than 1 hour.");
  });

  it("becomes a phone task when unacknowledged: after an hour where urgent, after a day otherwise", () => {
    const deliveries = [mail({ state: "delivered", deliveredAt: at("10:00") })];
    expect(state({ deliveries }, "11:30").phoneTask).toBeNull();
    expect(state({ deliveries, urgent: true }, "11:30").phoneTask).toBe("Not opened.");
    const dayLater = new Date(at("10:00").getTime() + 25 * 3600_000);
    const late = noticeState(
      { urgent: false, createdAt: at("10:00"), events: [], deliveries },
      dayLater,
      sayWhen,
    );
    expect(late.phoneTask).toBe("Not opened.");
    const events = [{ kind: "opened", at: at("10:05") }];
    expect(state({ deliveries, events, urgent: true }, "11:30").phoneTask).toBe("Opened, not acknowledged.");
  });

  it("lets what the family did count before the mail, and a wished call before that", () => {
    const deliveries = [mail({ state: "bounced", failedAt: at("10:02") })];
    const acknowledged = { kind: "acknowledged", at: at("10:10") };
    const asked = { kind: "call_requested", at: at("10:11") };
    const phoned = { kind: "phoned", at: at("10:20") };
    expect(state({ deliveries, events: [acknowledged] })).toMatchObject({
      code: "acknowledged",
      phoneTask: null,
    });
    expect(state({ deliveries, events: [acknowledged, asked] })).toMatchObject({
      code: "call_requested",
      phoneTask: "Asks for a call.",
    });
    expect(state({ deliveries, events: [acknowledged, asked, phoned] }).code).toBe("acknowledged");
    expect(state({ deliveries, events: [asked, phoned] })).toMatchObject({ code: "phoned", phoneTask: null });
    expect(state({ deliveries, events: [phoned, { kind: "call_requested", at: at("10:25") }] }).code).toBe(
      "call_requested",
    );
    expect(state({ deliveries, events: [{ kind: "phone_tried", at: at("10:20") }] }).code).toBe("bounced");
  });

  it("goes by the newest mail once it was sent again", () => {
    const again = mail({ createdAt: at("10:15"), state: "delivered", deliveredAt: at("10:16") });
    expect(state({ deliveries: [again, mail({ state: "bounced", failedAt: at("10:02") })] }).code).toBe(
      "delivered",
    );
  });

  it("is a phone task from the start where there is no mail", () => {
    expect(state({})).toMatchObject({ code: "written", phoneTask: "Is to be told by phone." });
  });

  it("tells its way in order, with times of the organisation's clock", () => {
    const way = noticeWay({
      events: [
        { kind: "opened", at: at("10:30") },
        { kind: "written", at: at("10:00"), by: "Dewi Pryce" },
      ],
      deliveries: [mail({ state: "delivered", sentAt: at("10:01"), deliveredAt: at("10:02") })],
    });
    expect(way.map(({ words }) => words)).toEqual([
      "Written (Dewi Pryce)",
      "E-mail sent",
      "E-mail delivered",
      "Opened by the family",
    ]);
    expect(sayWhenIn({ timeZone: "Pacific/Auckland", today: "2026-12-02" })(at("23:30"))).toBe("today 12:30");
    expect(sayWhenIn({ timeZone: "Europe/London", today: "2026-12-02" })(at("14:03"))).toBe("1 Dec 14:03");
  });

  it("says in one sentence who has not opened and who is to be phoned", () => {
    const delivered = state({ deliveries: [mail({ state: "delivered", deliveredAt: at("10:00") })] });
    const bounced = state({ deliveries: [mail({ state: "bounced", failedAt: at("10:00") })] });
    const done = state({ events: [{ kind: "acknowledged", at: at("10:10") }] });
    const of = (injuryId: string, found: typeof done) => ({ injuryId, state: found });
    expect(noticesSentence([of("a", delivered), of("b", delivered), of("b", bounced), of("c", done)])).toBe(
      "2 families have not opened their notices. 1 guardian needs a call.",
    );
    expect(noticesSentence([of("a", delivered), of("a", done), of("b", delivered)])).toBe(
      "1 family has not opened its notice. Nobody needs a call.",
    );
    expect(noticesSentence([of("a", done)])).toBe(
      "Every family has opened a notice or was told by phone. Nobody needs a call.",
    );
  });
});

describe("the one typed line that reaches a mail", () => {
  const names = { athlete: ["Ines", "Del Rio-Hay"], colleague: "Michael Foot" };
  it.each(["Ines", "the mother of inés", "Mrs Hay", "Knee desk", "Concussion nurse", "Dr Sprain"])(
    "refuses %s",
    (name) => {
      expect(mailNameProblem(name, names)).toBeDefined();
    },
  );
  it.each(["Michael Foot", "Dewi Pryce", "the front desk", "Sports office, ext. 12"])(
    "lets %s stand",
    (name) => {
      expect(mailNameProblem(name, names)).toBeUndefined();
    },
  );
});
