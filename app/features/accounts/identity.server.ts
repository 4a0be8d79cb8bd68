import { betterAuth } from "better-auth";
import { drizzleAdapter } from "better-auth/adapters/drizzle";
import { drizzle } from "drizzle-orm/postgres-js";
import postgres from "postgres";
import { env } from "~/platform/env.server";
import { log } from "~/platform/log.server";
import { account, attempt, session, user, verification } from "~db/schema/auth";
import { sendIdentityMail } from "./identity-mail.server";

export const passwordLength = { min: 12, max: 128 };

/**
 * better-auth does identity only: who somebody is. None of its HTTP endpoints is mounted (the allow-list is empty);
 * our own routes call its server functions behind our origin check and rate limits. Membership and roles are ours.
 * Made at first use, with a pool and a database role of its own.
 */
function makeIdentity() {
  const { DATABASE_AUTH_URL, BETTER_AUTH_SECRET, APP_ORIGIN } = env();
  const client = postgres(DATABASE_AUTH_URL, { max: 4, idle_timeout: 60, onnotice: () => {} });
  const db = drizzle(client, { schema: { user, session, account, verification, attempt } });
  const auth = betterAuth({
    secret: BETTER_AUTH_SECRET,
    baseURL: APP_ORIGIN,
    basePath: "/identity",
    trustedOrigins: [APP_ORIGIN],
    database: drizzleAdapter(db, { provider: "pg", schema: { user, session, account, verification } }),
    emailAndPassword: {
      enabled: true,
      requireEmailVerification: true,
      minPasswordLength: passwordLength.min,
      maxPasswordLength: passwordLength.max,
      revokeSessionsOnPasswordReset: true,
      resetPasswordTokenExpiresIn: 3600,
      sendResetPassword: async ({ user, token }) =>
        sendIdentityMail("password-reset", user, `${APP_ORIGIN}/reset-password?token=${token}`),
    },
    emailVerification: {
      sendOnSignUp: true,
      sendOnSignIn: true,
      expiresIn: 24 * 3600,
      sendVerificationEmail: async ({ user, token }) =>
        sendIdentityMail("verify-email", user, `${APP_ORIGIN}/verify-email?token=${token}`),
    },
    session: {
      expiresIn: 14 * 24 * 3600,
      updateAge: 24 * 3600,
      // A cached session would outlive its revocation.
      cookieCache: { enabled: false },
    },
    rateLimit: { enabled: false },
    // Its messages are fixed texts; what it hands along with them may hold addresses, and is left out.
    logger: { level: "warn", log: (level, message) => log[level]({ identity: message }, "identity") },
    advanced: {
      database: { generateId: () => crypto.randomUUID() },
      disableOriginCheck: false,
      useSecureCookies: APP_ORIGIN.startsWith("https://"),
      cookiePrefix: "haleside",
      ipAddress: { ipAddressHeaders: ["x-client-address"] },
    },
    databaseHooks: {
      user: {
        create: {
          before: async (data) => ({ data: { ...data, email: data.email.trim().toLowerCase() } }),
        },
      },
    },
  });
  return { auth, db, client };
}

let made: ReturnType<typeof makeIdentity> | undefined;

export function identity() {
  made ??= makeIdentity();
  return made;
}

export async function closeIdentity() {
  await made?.client.end({ timeout: 5 });
  made = undefined;
}

export type Person = { id: string; name: string; email: string; sessionId: string };

/** Who is signed in, from the request's cookie; undefined when nobody is. */
export async function currentPerson(request: Request): Promise<Person | undefined> {
  if (!request.headers.get("cookie")) return undefined;
  const found = await identity().auth.api.getSession({ headers: request.headers });
  if (!found?.user.emailVerified) return undefined;
  return {
    id: found.user.id,
    name: found.user.name,
    email: found.user.email,
    sessionId: found.session.id,
  };
}
