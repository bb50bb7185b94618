import type { Issue } from "@/lib/errors";
import type { Problem } from "@/lib/schemas/api";

/** What the API answered instead of a result: its problem document, as an error with the places in it. */
export class ApiError extends Error {
  readonly status: number;
  readonly errors: Issue[] | undefined;
  readonly requestId: string | null;

  constructor(status: number, problem: Partial<Problem>) {
    super(problem.detail ?? problem.title ?? `The server answered ${status}.`);
    this.name = "ApiError";
    this.status = status;
    this.errors = problem.errors;
    this.requestId = problem.requestId ?? null;
  }
}

/** Reads a problem document; anything else (a proxy's page, say) becomes the bare status. */
export async function errorOf(response: Response): Promise<ApiError> {
  const isProblem = response.headers.get("content-type")?.includes("json") ?? false;
  const body: unknown = isProblem ? await response.json().catch(() => ({})) : {};
  return new ApiError(response.status, typeof body === "object" && body !== null ? (body as Partial<Problem>) : {});
}
