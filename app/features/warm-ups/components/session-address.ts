/** The address of a session's warm-up page. */
export const sessionAddress = (slug: string, sessionId: string) => `/${slug}/sessions/${sessionId}/warm-up`;
