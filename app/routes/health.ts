import { checkHealth } from "~/features/health.server";

/** Health for a load balancer: 200 when all is well, 503 with the name of what is not. */
export async function loader() {
  const health = await checkHealth();
  return Response.json(health, {
    status: health.ok ? 200 : 503,
    headers: { "Cache-Control": "no-store" },
  });
}
