/** A running, seeded product for tests that speak to one, where `npm test` has not started it already. */
import { makeDataDir, productEnv, removeDataDir, startProduct } from "./start-product.mjs";

export default async function setUp() {
  if (process.env.TUFA_TEST_URL) return undefined;
  const dataDir = makeDataDir();
  const product = await startProduct({ dataDir, onLine: (line) => process.stderr.write(`${line}\n`) }).catch((error) => {
    removeDataDir(dataDir);
    throw error;
  });
  Object.assign(process.env, productEnv(dataDir, product.address));
  return async () => {
    await product.stop();
    removeDataDir(dataDir);
  };
}
