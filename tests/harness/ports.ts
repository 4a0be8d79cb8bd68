import { createServer } from "node:net";

/** A port of 127.0.0.1 that nobody listens on now. */
export function findPort(): Promise<number> {
  return new Promise((resolve, reject) => {
    const server = createServer();
    server.once("error", reject);
    server.listen(0, "127.0.0.1", () => {
      const address = server.address();
      server.close(() => {
        if (address && typeof address === "object") resolve(address.port);
        else reject(new Error("No free port."));
      });
    });
  });
}
