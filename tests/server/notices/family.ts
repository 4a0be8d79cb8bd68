import { randomUUID } from "node:crypto";
import { RouterContextProvider } from "react-router";
import { readFamilyPage } from "~/features/notices/door.server";
import { type SendInput, sendSchema } from "~/features/notices/notices.schema";
import { prepareNotice, sendNotices } from "~/features/notices/writing.server";
import { requestContext } from "~/middleware/request-context";
import { addDays } from "~/platform/clock";
import { findLinks } from "~/platform/mail/fake/inbox.server";
import { action, loader } from "~/routes/families/notice";
import { maintenance, makeAthlete, makeClub, makeGuardian, makeInjury, openMailbox } from "../../harness";

/** A club with an athlete whose name and injury must never be seen in a mail, two guardians and an injury. */
export async function makeFamily(given: { urgent?: boolean; dateOfBirth?: string } = {}) {
  const club = await makeClub();
  const trainer = club.scopes.trainer;
  const athlete = await makeAthlete(club.staff, {
    teamId: club.team.id,
    givenName: "Quillon",
    familyName: "Zarathorn",
    dateOfBirth: given.dateOfBirth ?? addDays(trainer.today, -15 * 365),
  });
  const tag = randomUUID().slice(0, 8);
  const first = await makeGuardian(club.staff, {
    athleteIds: [athlete.id],
    name: "Maren Oakes",
    email: `first-${tag}@example.org`,
    phone: "+44 1632 960201",
    guardianship: { relation: "mother", phoneOrder: 1 },
  });
  const second = await makeGuardian(club.staff, {
    athleteIds: [athlete.id],
    name: "Tobias Vane",
    email: `second-${tag}@example.org`,
    phone: "+44 1632 960202",
    guardianship: { relation: "father", phoneOrder: 2 },
  });
  const injury = await makeInjury(club.staff, {
    athleteId: athlete.id,
    signs: given.urgent ? ["pop", "swelling"] : [],
    firstCare: ["ice"],
    diagnosis: "Suspected anterior cruciate rupture",
    description: "Zarathorn heard a pop in the knee",
    couldContinue: false,
  });
  return { club, trainer, athlete, first, second, injury, dateOfBirth: athlete.dateOfBirth ?? "" };
}

export type Family = Awaited<ReturnType<typeof makeFamily>>;

/** What the form of the page sends when nothing but what is given was changed. */
export async function formOf(family: Family, given: Partial<SendInput> = {}): Promise<SendInput> {
  const prepared = await prepareNotice(family.trainer, family.injury.id);
  return sendSchema.parse({
    ...prepared.words,
    operation: prepared.operation,
    urgency: prepared.injury.urgency,
    tell: prepared.guardians.filter(({ way, already }) => way === "email" && !already).map(({ id }) => id),
    again: [],
    callName: prepared.call.name,
    callPhone: prepared.call.phone,
    ...(prepared.injury.urgency === "urgent"
      ? {
          callGuardian: family.first.id,
          callOutcome: "reached",
          callTold: "Told of the knee; is on her way.",
        }
      : {}),
    ...given,
  });
}

export async function send(family: Family, given: Partial<SendInput> = {}) {
  return sendNotices(family.trainer, family.injury.id, await formOf(family, given));
}

/** The newest mail to an address, and the path of the link in it. */
export async function mailTo(email: string | null) {
  const { inbox } = await openMailbox();
  const [mail] = inbox.list(email ?? "");
  if (!mail) return undefined;
  const link = findLinks(mail.text).find((each) => each.includes("/families/") && !each.includes("stop="));
  return { mail, path: new URL(link ?? "http://none.example.org").pathname };
}

export async function until<T>(what: () => Promise<T | undefined | false>, seconds = 20): Promise<T> {
  const end = Date.now() + seconds * 1000;
  for (;;) {
    const found = await what();
    if (found) return found;
    if (Date.now() > end) throw new Error("It did not come about in time.");
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
}

export const arrives = (email: string | null) => until(() => mailTo(email));

/** The states of an injury's deliveries, oldest first, as the database holds them. */
export const deliveriesOf = (family: Family) =>
  maintenance()<
    {
      id: string;
      state: string;
      guardian_id: string;
      attempts: number;
      last_error: string | null;
      provider_id: string | null;
    }[]
  >`
    select d.id, d.state, d.guardian_id, d.attempts, d.last_error, d.provider_id from deliveries d
    join notices n on n.organisation_id = d.organisation_id and n.id = d.notice_id
    where n.organisation_id = ${family.club.organisation.id} and n.injury_id = ${family.injury.id} order by d.created_at`;

type Args = Parameters<typeof loader>[0];
let address = 0;

/** A browser at a family's page: keeps its cookie, presses its buttons. */
export function browserAt(path: string) {
  let cookie = "";
  const [, , organisationId = "", token = ""] = path.split("/");
  address += 1;
  const clientAddress = `203.0.113.${address % 250}`;
  const argsOf = (request: Request) => {
    const context = new RouterContextProvider();
    context.set(requestContext, { id: randomUUID(), nonce: "", clientAddress, notePattern: () => {} });
    return { request, params: { organisationId, token }, context } as unknown as Args;
  };
  const url = `http://localhost:3000${path}`;
  return {
    part: token,
    async get() {
      const answer = await loader(argsOf(new Request(url, { headers: { Cookie: cookie } })));
      return answer.data.page;
    },
    async post(form: Record<string, string>) {
      const body = new URLSearchParams(form);
      const answer = await action(
        argsOf(new Request(url, { method: "POST", body, headers: { Cookie: cookie } })),
      );
      if (answer instanceof Response) {
        const set = answer.headers.get("Set-Cookie");
        if (set) cookie = set.split(";")[0] ?? "";
        return { status: answer.status, cookie: set, errors: undefined };
      }
      return { status: answer.init?.status ?? 200, cookie: null, errors: answer.data.errors };
    },
    answer(day: string) {
      return this.post({ intent: "answer", answer: day });
    },
    takeCookie: () => cookie,
    giveCookie: (value: string) => {
      cookie = value;
    },
  };
}

/** The page as the door itself answers, for hand-made addresses. */
export const pageAt = (organisationId: string, part: string) =>
  readFamilyPage({
    organisationId,
    part,
    clientAddress: "203.0.113.251",
    requestId: randomUUID(),
    opening: null,
  });
