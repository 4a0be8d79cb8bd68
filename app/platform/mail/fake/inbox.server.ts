import { createHash, randomUUID } from "node:crypto";

/** A mail as the fake keeps it. */
export type FakeMail = {
  id: string;
  from: string;
  to: string[];
  subject: string;
  html: string | null;
  text: string | null;
  replyTo: string[];
  headers: Record<string, string>;
  createdAt: Date;
  /** What happened to it, oldest first, with whether our webhook took the news. */
  events: { type: string; at: Date; webhook: "none" | "waiting" | "taken" | "given up" }[];
};

export type FakeMailDraft = Omit<FakeMail, "id" | "createdAt" | "events">;

/** The real service forgets idempotency keys after a day. */
const KEY_LIFETIME_MS = 24 * 60 * 60 * 1000;

export type FakeInbox = ReturnType<typeof createFakeInbox>;

/**
 * Mails in memory, newest first, with the idempotency rule of the real service. Never more than `limit`
 * mails: the oldest go, while their keys are still remembered for a day.
 */
export function createFakeInbox(options: { limit: number; now?: () => Date }) {
  const now = options.now ?? (() => new Date());
  const keys = new Map<string, { id: string; bodyHash: string; at: number }>();
  let mails: FakeMail[] = [];

  function forgetOldKeys() {
    for (const [key, entry] of keys) {
      if (now().getTime() - entry.at < KEY_LIFETIME_MS) return;
      keys.delete(key);
    }
  }

  return {
    /**
     * Takes a mail. A key seen within a day answers with the first mail's id, or `other-body` when what it
     * came with differs.
     */
    accept(draft: FakeMailDraft, key: string | null) {
      forgetOldKeys();
      const bodyHash = createHash("sha256").update(JSON.stringify(draft)).digest("hex");
      const known = key === null ? undefined : keys.get(key);
      if (known && known.bodyHash !== bodyHash) return { outcome: "other-body" as const };
      if (known) return { outcome: "repeated" as const, id: known.id };

      const mail: FakeMail = { ...draft, id: randomUUID(), createdAt: now(), events: [] };
      mails = [mail, ...mails].slice(0, options.limit);
      if (key !== null) keys.set(key, { id: mail.id, bodyHash, at: mail.createdAt.getTime() });
      return { outcome: "taken" as const, id: mail.id, mail };
    },

    find(id: string) {
      return mails.find((mail) => mail.id === id);
    },

    /** Newest first; with an address, only what was sent to it. */
    list(to?: string) {
      const wanted = to?.trim().toLowerCase();
      return wanted ? mails.filter((mail) => mail.to.some((one) => readAddress(one) === wanted)) : mails;
    },

    /** Forgets all mails and keys. */
    clear() {
      mails = [];
      keys.clear();
    },
  };
}

/** The bare address of `Name <address>` or `address`, in lower case. */
export function readAddress(mailbox: string) {
  const inBrackets = /<([^<>]+)>\s*$/.exec(mailbox)?.[1];
  return (inBrackets ?? mailbox).trim().toLowerCase();
}

/** Web links of a plain-text part, each once, in their order. */
export function findLinks(text: string | null) {
  const found = text?.match(/https?:\/\/[^\s<>"')\]]+/g) ?? [];
  return [...new Set(found.map((link) => link.replace(/[.,;:!?]+$/, "")))];
}
