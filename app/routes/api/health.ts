import { checkHealth } from "~/features/health.server";
import { apiLoader } from "~/middleware/handlers.server";

export const loader = apiLoader(async () => {
  const health = await checkHealth();
  return Response.json(health, { status: health.ok ? 200 : 503, headers: { "Cache-Control": "no-store" } });
});
