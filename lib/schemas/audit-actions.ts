/** What the audit trail records, noun before verb. The services write only these; the administrators' page filters by them. */
export const AUDIT_ACTIONS = [
  "job-submitted", "job-cancelled", "job-retried", "sample-set-created", "sample-set-version-added", "sample-set-deleted",
  "sign-in", "sign-in-failed", "sign-in-limited", "sign-out", "token-created", "token-revoked", "user-created", "user-changed", "password-link-created", "password-set", "demo-seeded",
] as const;
export type AuditAction = (typeof AUDIT_ACTIONS)[number];
