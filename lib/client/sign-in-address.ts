/** The sign-in page, and the way back from it. */

/** Address of the sign-in page that leads back to where one is. */
export const signInAddress = (): string => `/sign-in?${new URLSearchParams({ callbackUrl: location.pathname + location.search })}`;

/**
 * Address to go to after signing in, whole, or the front page. Only pages of this very site: a link from elsewhere must not choose where a
 * signed-in person lands. The whole address, because a path may itself read as one ("/.//elsewhere.example" has the path "//elsewhere.example").
 */
export function wantedAddress(search: string, origin: string): string {
  const front = `${origin}/`;
  const wanted = new URLSearchParams(search).get("callbackUrl");
  if (!wanted || !URL.canParse(wanted, origin)) return front;
  const url = new URL(wanted, origin);
  return url.origin === origin && !/^\/(sign-in|set-password|api)(\/|$)/.test(url.pathname) ? url.href : front;
}
