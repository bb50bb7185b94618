import pg from "pg";
import { to as copyTo } from "pg-copy-streams";
import { pool } from "./client";

/** Values that may stand in a COPY statement, which takes no parameters. */
type Literal = string | number | readonly number[];

function literal(value: Literal): string {
  if (typeof value === "string") return pg.escapeLiteral(value);
  const numbers = Array.isArray(value) ? value : [value as number];
  if (!numbers.every(Number.isSafeInteger)) throw new Error("only whole numbers may stand in a COPY statement");
  return Array.isArray(value) ? `'{${numbers.join(",")}}'` : String(value);
}

/** Signature, flags and extension length of the binary COPY format (PostgreSQL manual, COPY, Binary Format). */
const COPY_HEADER_BYTES = 19;

/** Values of the only field of each tuple; the trailer is a field count of −1. */
function parseCopy(data: Buffer): (Buffer | null)[] {
  const values: (Buffer | null)[] = [];
  for (let at = COPY_HEADER_BYTES; data.readInt16BE(at) !== -1;) {
    const length = data.readInt32BE(at + 2);
    at += 6;
    values.push(length < 0 ? null : data.subarray(at, at + Math.max(0, length)));
    at += Math.max(0, length);
  }
  return values;
}

/**
 * The values of a SELECT with ONE column, of type bytea; `$n` in the text stands for the n-th value. They come by
 * binary COPY: the driver's usual way is hex text, at twice the bytes and a fifth of the speed. The values share one
 * buffer, and should be small enough together to be held at once.
 */
export async function readBytes(select: string, values: readonly Literal[]): Promise<(Buffer | null)[]> {
  const text = select.replaceAll(/\$(\d+)/g, (_, number: string) => literal(values[Number(number) - 1]));
  const client = await pool().connect();
  let broken: Error | undefined;
  try {
    const parts: Buffer[] = [];
    for await (const part of client.query(copyTo(`copy (${text}) to stdout (format binary)`))) parts.push(part as Buffer);
    return parseCopy(Buffer.concat(parts));
  } catch (error) {
    broken = error instanceof Error ? error : new Error(String(error));
    throw error;
  } finally {
    client.release(broken);
  }
}
