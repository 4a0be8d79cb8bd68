import { createServer } from "node:net";
import { Failure } from "../../app/platform/machine/failure.mjs";

/**
 * Whether a port is free on the loopback addresses, IPv4 and IPv6, since `localhost` may mean either.
 *
 * @param {number} port
 * @returns {Promise<boolean>}
 */
export async function isPortFree(port) {
  return (await canListen(port, "127.0.0.1")) && (await canListen(port, "::1"));
}

/**
 * @param {number} port
 * @param {string} host
 * @returns {Promise<boolean>}
 */
function canListen(port, host) {
  return new Promise((resolve) => {
    const server = createServer();
    server.once("error", (/** @type {NodeJS.ErrnoException} */ error) => {
      // A machine without IPv6 has no such address; that is not a taken port.
      resolve(error.code === "EADDRNOTAVAIL" || error.code === "EAFNOSUPPORT");
    });
    server.listen({ port, host, exclusive: true }, () => server.close(() => resolve(true)));
  });
}

/**
 * The first free port at or after `from`.
 *
 * @param {number} from
 * @param {readonly number[]} [except]
 * @returns {Promise<number>}
 */
export async function findFreePort(from, except = []) {
  for (let port = from; port < from + 500 && port < 65_536; port++) {
    if (!except.includes(port) && (await isPortFree(port))) return port;
  }
  throw new Failure(
    `There is no free port from ${from} on.`,
    "Stop some of the servers on this machine and run it again.",
  );
}
