import { APIError } from "better-auth/api";
import { DomainError } from "~/platform/errors";
import { countAttempt, forgetAttempts } from "./attempts.server";
import { identity, passwordLength } from "./identity.server";
import { passwordProblem } from "./passwords.server";

type Client = { request: Request; clientAddress: string };

/** Headers for better-auth: the person's cookies, and the client address as the server saw it. */
function identityHeaders({ request, clientAddress }: Client) {
  const headers = new Headers(request.headers);
  headers.set("x-client-address", clientAddress);
  return headers;
}

/** The cookies of better-auth's answer, to pass on. */
function cookiesOf(response: Response) {
  const headers = new Headers();
  for (const cookie of response.headers.getSetCookie()) headers.append("Set-Cookie", cookie);
  return headers;
}

const wrongSignIn = () =>
  new DomainError(
    "invalid",
    "The e-mail address and the password do not belong together. Check both and try again.",
  );

/**
 * Signs a person in. The answer to a wrong password, an unknown address and an address that is not verified is the
 * same; an unverified one gets a fresh verification mail.
 * @returns headers that carry the session's cookie
 */
export async function signIn(client: Client, credentials: { email: string; password: string }) {
  await countAttempt("sign-in", { account: credentials.email, clientAddress: client.clientAddress });
  const response = await identity().auth.api.signInEmail({
    body: credentials,
    headers: identityHeaders(client),
    asResponse: true,
  });
  if (!response.ok) throw wrongSignIn();
  await forgetAttempts("sign-in", credentials.email);
  return cookiesOf(response);
}

export async function signOut(client: Client) {
  const response = await identity().auth.api.signOut({ headers: identityHeaders(client), asResponse: true });
  return cookiesOf(response);
}

/** Sends a link to choose a new password, if the address belongs to somebody. The answer never tells. */
export async function askForPasswordReset(client: Client, email: string) {
  await countAttempt("password-reset", { account: email, clientAddress: client.clientAddress });
  await identity().auth.api.requestPasswordReset({
    body: { email, redirectTo: "/reset-password" },
    headers: identityHeaders(client),
  });
}

/** Sets a new password by the mailed link and revokes every session of the person. */
export async function resetPassword(
  client: Client,
  { token, password }: { token: string; password: string },
) {
  await countAttempt("password-reset", { clientAddress: client.clientAddress });
  const problem = passwordProblem(password, { email: "", name: "" }, passwordLength);
  if (problem) throw new DomainError("invalid", problem, { fields: { password: [problem] } });
  try {
    await identity().auth.api.resetPassword({ body: { token, newPassword: password } });
  } catch (error) {
    if (!(error instanceof APIError)) throw error;
    throw new DomainError("gone", "This link has been used or has expired. Ask for a new one.");
  }
}

/** Confirms an e-mail address by its mailed link. @throws DomainError gone for a used or expired one */
export async function verifyEmail(token: string) {
  try {
    await identity().auth.api.verifyEmail({ query: { token } });
  } catch (error) {
    if (!(error instanceof APIError)) throw error;
    throw new DomainError(
      "gone",
      "This link has been used or has expired. Sign in, and a new one is sent to you.",
    );
  }
}

/** Changes the signed-in person's password and revokes their other sessions. */
export async function changePassword(
  client: Client,
  person: { email: string; name: string },
  { current, password }: { current: string; password: string },
) {
  await countAttempt("sign-in", { account: person.email, clientAddress: client.clientAddress });
  const problem = passwordProblem(password, person, passwordLength);
  if (problem) throw new DomainError("invalid", problem, { fields: { password: [problem] } });
  const response = await identity().auth.api.changePassword({
    body: { currentPassword: current, newPassword: password, revokeOtherSessions: true },
    headers: identityHeaders(client),
    asResponse: true,
  });
  if (!response.ok)
    throw new DomainError("invalid", "Your current password is not right.", {
      fields: { current: ["Your current password is not right."] },
    });
  return cookiesOf(response);
}

/** The person's sessions: where they are signed in. */
export async function listSessions(client: Client, currentId: string) {
  const sessions = await identity().auth.api.listSessions({ headers: identityHeaders(client) });
  return sessions.map(({ id, userAgent, updatedAt }) => ({
    id,
    device: describeDevice(userAgent ?? ""),
    lastUsed: updatedAt,
    current: id === currentId,
  }));
}

/** Ends one of the person's own sessions, by its id; the token never reaches a page. */
export async function revokeSession(client: Client, sessionId: string) {
  const headers = identityHeaders(client);
  const sessions = await identity().auth.api.listSessions({ headers });
  const found = sessions.find(({ id }) => id === sessionId);
  if (!found) throw new DomainError("not_found", "That sign-in has ended already.");
  await identity().auth.api.revokeSession({ body: { token: found.token }, headers });
}

export async function revokeOtherSessions(client: Client) {
  await identity().auth.api.revokeOtherSessions({ headers: identityHeaders(client) });
}

/** A device in a few words, from what its browser says of itself. */
function describeDevice(userAgent: string) {
  const system = /iPhone|iPad|Android|Windows|Mac OS X|Linux/.exec(userAgent)?.[0] ?? "unknown device";
  const browser = /Edg|Firefox|Chrome|Safari/.exec(userAgent)?.[0] ?? "a browser";
  const names: Record<string, string> = { Edg: "Edge", "Mac OS X": "Mac" };
  return `${names[browser] ?? browser} on ${names[system] ?? system}`;
}
