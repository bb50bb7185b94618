/** Thread entry of the web process: reads one large document (lib/services/intake/run-intake.ts) and ends. */
import { parentPort, workerData } from "node:worker_threads";
import { AppError } from "@/lib/errors";
import { type IntakeReply, type IntakeTask, performIntake } from "@/lib/services/intake/run-intake";

function reply(): IntakeReply {
  try {
    return { ok: true, result: performIntake(workerData as IntakeTask) };
  } catch (error) {
    if (error instanceof AppError) return { ok: false, code: error.code, message: error.message, ...(error.errors ? { errors: error.errors } : {}) };
    return { ok: false, code: null, message: error instanceof Error ? (error.stack ?? error.message) : String(error) };
  }
}

parentPort?.postMessage(reply());
