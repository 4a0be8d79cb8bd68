import { bornOf } from "../../app/platform/machine/lock.mjs";
import { clusterNames, clusterUrls, deleteCluster, dropCluster, openCluster } from "./cluster.mjs";
import { localEnvironment } from "./environment.mjs";
import { findFreePort } from "./ports.mjs";

/** Clusters that live for one run of the tests. */

const PREFIX = "run-";

/**
 * A fresh cluster for this run. Those that killed runs left behind are deleted first.
 *
 * @param {(drop: () => Promise<void>) => void} onMake told how to delete it, before anything is made
 */
export async function openTestCluster(onMake) {
  for (const name of clusterNames(PREFIX)) {
    if (bornOf(Number(name.slice(PREFIX.length))) === "") await dropCluster(name);
  }
  const name = `${PREFIX}${process.pid}`;
  /** @type {() => Promise<void>} */
  let leave = async () => {};
  onMake(async () => {
    await leave();
    deleteCluster(name);
  });
  return openCluster({
    name,
    lasting: false,
    onStart: (way) => {
      leave = way;
    },
  });
}

/**
 * What the tests are told of a cluster: the variables that a program gets, for its database `haleside` (empty but
 * for the extensions: the owner may use it as a template), and TEST_SUPERUSER_URL, the superuser in `postgres`.
 *
 * @param {import("./cluster.mjs").Cluster} cluster
 * @returns {Promise<Record<string, string>>}
 */
export async function testEnvironment(cluster) {
  const local = localEnvironment(cluster, await findFreePort(18_025));
  return { ...local, TEST_SUPERUSER_URL: clusterUrls(cluster).superuser };
}
