import { AppError } from "@/lib/errors";
import { problemResponse } from "./problem";
import { requestIdOf } from "./request-id";
import type { RouteHandler } from "./route";

const METHODS = ["GET", "POST", "PUT", "PATCH", "DELETE"] as const;
type Method = (typeof METHODS)[number];

/** The exports of a route file: its own methods, and for the others a 405 that names those it has. */
export function methods(own: Partial<Record<Method, RouteHandler>>): Record<Method, RouteHandler> {
  const allow = METHODS.filter((method) => own[method]).flatMap((method) => (method === "GET" ? ["GET", "HEAD"] : [method])).join(", ");
  const refuse: RouteHandler = async (request) => {
    const requestId = requestIdOf(request);
    const error = new AppError("method-not-allowed", `${request.method} is not taken here; allowed: ${allow}.`, { headers: { Allow: allow } });
    return problemResponse(error, requestId, { "Request-Id": requestId });
  };
  return Object.fromEntries(METHODS.map((method) => [method, own[method] ?? refuse])) as Record<Method, RouteHandler>;
}
