import { randomUUID } from "node:crypto";
import { foldText } from "~/platform/fold-text";
import type { RosterRow } from "~imports/roster/definition";
import type { RowWarning } from "../mapping/read-row";
import type {
  AthleteRecord,
  FieldChange,
  GuardianRecord,
  GuardianshipRecord,
  PendingWrites,
} from "./records";

type Given = NonNullable<RosterRow["guardian"]>;
export type GuardianOutcome = { made: "guardian" | "link" | null; changed: boolean };

/** The name a guardian has while the file gives only an address. */
export const unnamedGuardian = "Parent or guardian";

const folded = (text: string | null | undefined) => foldText(text ?? "");
const address = (text: string | null | undefined) => (text ?? "").trim().toLowerCase();
const digits = (text: string | null | undefined) => (text ?? "").replace(/\D/gu, "");

/**
 * The guardians of the athletes: a row's guardian is one of the athlete's own by e-mail, or by name where the phone
 * does not contradict. A guardian of another athlete with the same e-mail and the same name is the same person.
 */
export class GuardianBook {
  private readonly byId = new Map<string, GuardianRecord>();
  private readonly links = new Map<string, GuardianshipRecord[]>();
  private readonly shared = new Map<string, GuardianRecord>();
  /** Those that a line of this file has named. */
  private readonly claimed = new Set<GuardianshipRecord>();
  private readonly writes: PendingWrites;

  constructor(
    guardians: readonly GuardianRecord[],
    links: readonly GuardianshipRecord[],
    writes: PendingWrites,
  ) {
    for (const guardian of guardians) this.add(guardian);
    for (const link of links) this.linksOf(link.athleteId).push(link);
    this.writes = writes;
  }

  apply(
    athlete: AthleteRecord,
    given: Given,
    changes: FieldChange[],
    warnings: RowWarning[],
  ): GuardianOutcome {
    if (!given.name && !given.email && !given.phone) return { made: null, changed: false };
    const link = this.find(athlete, given);
    const guardian = link && this.byId.get(link.guardianId);
    if (!link || !guardian) return this.make(athlete, given, changes);
    this.claimed.add(link);
    if (link.ended) {
      const warning =
        "This guardian was ended for the athlete and stays so: change it on the athlete’s page.";
      warnings.push({ column: "Guardian’s name", cell: given.name ?? given.email ?? "", warning });
      return { made: null, changed: false };
    }
    const changed = this.update(guardian, given, changes);
    return { made: null, changed: this.relate(link, given, changes, warnings) || changed };
  }

  /** Two parents may share one address: what an earlier line of the file named is not renamed by a later one. */
  private find(athlete: AthleteRecord, given: Given) {
    const own = this.linksOf(athlete.id);
    const by = (test: (guardian: GuardianRecord, given: Given) => boolean) =>
      own.find(({ guardianId }) => {
        const guardian = this.byId.get(guardianId);
        return guardian !== undefined && test(guardian, given);
      });
    const byAddress = () =>
      own.find((link) => !this.isTaken(link, given) && hasAddress(this.byId.get(link.guardianId), given));
    return by(hasBoth) ?? by(hasName) ?? byAddress() ?? by(hasOnlyPhone);
  }

  private isTaken(link: GuardianshipRecord, given: Given) {
    return Boolean(given.name) && this.claimed.has(link);
  }

  private make(athlete: AthleteRecord, given: Given, changes: FieldChange[]): GuardianOutcome {
    const name = given.name ?? unnamedGuardian;
    const known = given.email ? this.shared.get(sharedKey(name, given.email)) : undefined;
    const guardian = known ?? {
      id: randomUUID(),
      name,
      email: given.email ?? null,
      phone: given.phone ?? null,
      language: given.language ?? "en",
      emailStopped: false,
      version: 1,
    };
    changes.push({ field: "Guardian", before: null, after: guardian.name });
    if (known) this.update(known, given, changes);
    else {
      this.add(guardian);
      this.writes.insert("guardians", guardian);
    }
    const own = this.linksOf(athlete.id);
    const link: GuardianshipRecord = {
      athleteId: athlete.id,
      guardianId: guardian.id,
      relation: given.relation ?? "parent",
      phoneOrder: Math.max(0, ...own.map(({ phoneOrder }) => phoneOrder)) + 1,
      keep: false,
      ended: false,
      version: 1,
    };
    own.push(link);
    this.claimed.add(link);
    this.writes.insert("guardianships", link);
    return { made: known ? "link" : "guardian", changed: true };
  }

  /** Empty cells leave what is stored. A corrected address may be written to again. */
  private update(guardian: GuardianRecord, given: Given, changes: FieldChange[]) {
    const before = changes.length;
    const set = (field: "name" | "email" | "phone" | "language", label: string, same: boolean) => {
      const next = given[field];
      if (!next || same || guardian[field] === next) return;
      changes.push({ field: label, before: guardian[field], after: next });
      guardian[field] = next;
      if (field === "email") guardian.emailStopped = false;
    };
    set("name", "Guardian’s name", false);
    set("email", "Guardian’s e-mail", address(given.email) === address(guardian.email));
    set("phone", "Guardian’s phone", digits(given.phone) === digits(guardian.phone));
    set("language", "Guardian’s language", false);
    const changed = changes.length > before;
    if (changed) this.writes.update("guardians", guardian);
    if (guardian.email) this.shared.set(sharedKey(guardian.name, guardian.email), guardian);
    return changed;
  }

  private relate(link: GuardianshipRecord, given: Given, changes: FieldChange[], warnings: RowWarning[]) {
    if (!given.relation || given.relation === link.relation) return false;
    if (link.keep) {
      const warning = "The relation of this guardian is left as it is: change it on the athlete’s page.";
      warnings.push({ column: "Guardian’s relation", cell: given.relation, warning });
      return false;
    }
    changes.push({ field: "Guardian’s relation", before: link.relation, after: given.relation });
    link.relation = given.relation;
    this.writes.update("guardianships", link);
    return true;
  }

  private linksOf(athleteId: string) {
    const own = this.links.get(athleteId) ?? [];
    this.links.set(athleteId, own);
    return own;
  }

  private add(guardian: GuardianRecord) {
    this.byId.set(guardian.id, guardian);
    if (guardian.email) this.shared.set(sharedKey(guardian.name, guardian.email), guardian);
  }
}

function sharedKey(name: string, email: string) {
  return `${folded(name)}\n${address(email)}`;
}

function hasAddress(guardian: GuardianRecord | undefined, given: Given) {
  return Boolean(given.email && guardian?.email) && address(given.email) === address(guardian?.email);
}

function hasBoth(guardian: GuardianRecord, given: Given) {
  return hasAddress(guardian, given) && folded(given.name) === folded(guardian.name);
}

function hasName(guardian: GuardianRecord, given: Given) {
  if (!given.name || folded(given.name) !== folded(guardian.name)) return false;
  const [mine, theirs] = [digits(given.phone), digits(guardian.phone)];
  return mine === "" || theirs === "" || mine === theirs;
}

function hasOnlyPhone(guardian: GuardianRecord, given: Given) {
  if (given.name || given.email) return false;
  return digits(given.phone) !== "" && digits(given.phone) === digits(guardian.phone);
}
