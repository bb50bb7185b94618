/** A PostgreSQL for a run of database tests, where `npm test` has not started one already. */
import { openCluster } from "../../jobs/launcher/cluster.mjs";
import { sayOnStderr } from "../../jobs/launcher/say.mjs";
import { makeDataDir, removeDataDir, serverUrl } from "./start-product.mjs";

export default async function setUp() {
  if (process.env.TUFA_TEST_SERVER) return undefined;
  sayOnStderr();
  const dataDir = makeDataDir();
  const cluster = await openCluster(dataDir, { isThrowaway: true });
  process.env.TUFA_TEST_SERVER = serverUrl(dataDir);
  return async () => {
    await cluster.close();
    removeDataDir(dataDir);
  };
}
