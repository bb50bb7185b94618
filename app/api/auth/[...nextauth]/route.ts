import NextAuth from "next-auth";
import { NextRequest } from "next/server";
import { authOptions } from "@/lib/http/auth-options";
import { problemResponse } from "@/lib/http/problem";
import { readBody } from "@/lib/http/read-body";
import { requestIdOf } from "@/lib/http/request-id";
import { SIGN_IN_LIMITS } from "@/lib/services/users/sign-in";

type Context = { params: Promise<{ nextauth: string[] }> };

/** Far above what a sign-in form sends; next-auth itself would read a body of any size. */
const BODY_LIMIT = 64 * 1024;

/** next-auth answers every refusal with 401; one for too many attempts is told apart, for scripts and for the page. */
async function limitedAs429(response: Response): Promise<Response> {
  if (response.status !== 401) return response;
  const text = await response.text();
  const headers = new Headers(response.headers);
  const isLimited = text.includes("error=rate-limited");
  if (isLimited) headers.set("Retry-After", String(SIGN_IN_LIMITS.globalSeconds));
  return new Response(text, { status: isLimited ? 429 : 401, headers });
}

async function handler(request: NextRequest, context: Context): Promise<Response> {
  try {
    if (request.method !== "POST") return await NextAuth(request, context, authOptions());
    const bytes = await readBody(request, BODY_LIMIT);
    const bounded = new NextRequest(request.url, { method: "POST", headers: request.headers, body: new Blob([bytes as BlobPart]) });
    return await limitedAs429((await NextAuth(bounded, context, authOptions())) as Response);
  } catch (error) {
    return problemResponse(error, requestIdOf(request));
  }
}

export { handler as GET, handler as POST };
