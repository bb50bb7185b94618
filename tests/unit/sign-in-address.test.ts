import { describe, expect, test } from "vitest";
import { wantedAddress } from "@/lib/client/sign-in-address";

const ORIGIN = "http://127.0.0.1:3000";
const to = (callbackUrl: string): string => wantedAddress(`?${new URLSearchParams({ callbackUrl })}`, ORIGIN);

describe("where signing in leads", () => {
  test.each([["/jobs/job_1?sort=-pH", `${ORIGIN}/jobs/job_1?sort=-pH`], [`${ORIGIN}/tokens`, `${ORIGIN}/tokens`], ["/spec", `${ORIGIN}/spec`]])("%s is a page of this site", (wanted, address) => {
    expect(to(wanted)).toBe(address);
  });

  test.each(["https://elsewhere.example/", "//elsewhere.example", "/\\elsewhere.example", "javascript:alert(1)", "data:text/html,x", "http://", ""])("%s leads to the front page", (wanted) => {
    expect(to(wanted)).toBe(`${ORIGIN}/`);
  });

  test.each(["/.//elsewhere.example", "/x/..//elsewhere.example"])("%s, a path that reads as another host, stays on this one", (wanted) => {
    expect(new URL(to(wanted), ORIGIN).origin).toBe(ORIGIN);
    expect(to(wanted).startsWith(`${ORIGIN}/`)).toBe(true);
  });

  test.each(["/sign-in", "/sign-in?callbackUrl=/jobs", "/set-password", "/api/v1/me"])("%s is no page to land on", (wanted) => {
    expect(to(wanted)).toBe(`${ORIGIN}/`);
  });

  test("no wish leads to the front page", () => expect(wantedAddress("", ORIGIN)).toBe(`${ORIGIN}/`));
});
