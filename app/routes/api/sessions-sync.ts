import { syncSchema } from "~/features/sessions/sync.schema";
import { syncOperations } from "~/features/sessions/sync.server";
import { apiAction } from "~/middleware/handlers.server";

/** Operations of phones and of the pitch's pages; see sync.schema.ts for their fields. */
export const action = apiAction(syncSchema, async ({ scope, body }) => ({
  answers: await syncOperations(scope, body.operations),
}));
