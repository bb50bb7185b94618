/** A database without workers for tests that call route handlers in their own process: what they submit must stay as it is. */
import { randomBytes } from "node:crypto";
import path from "node:path";
import pg from "pg";
import { buildBundles } from "../../jobs/launcher/build-product.mjs";
import { captured } from "../../jobs/launcher/captured.mjs";
import { ROOT } from "../../jobs/launcher/settings.mjs";
import openServer from "./throw-away-server.mjs";

export default async function setUp() {
  const closeServer = await openServer();
  const server = new pg.Client(process.env.TUFA_TEST_SERVER);
  server.on("error", () => {});
  await server.connect();
  const name = `t_api_${randomBytes(5).toString("hex")}`;
  await server.query(`create database ${name}`);
  const url = Object.assign(new URL(process.env.TUFA_TEST_SERVER), { pathname: `/${name}` }).href;
  await buildBundles();
  const { code, output } = await captured(process.execPath, [path.join(ROOT, ".build/migrate.mjs")], { DATABASE_URL: url });
  if (code !== 0) throw new Error(`the database for tests/api cannot be prepared: ${output}`);
  process.env.TUFA_TEST_API_DATABASE = url;
  return async () => {
    await server.query(`drop database ${name} with (force)`);
    await server.end();
    await closeServer?.();
  };
}
