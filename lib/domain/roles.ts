/**
 * A person may hold several roles; what they may do is the union, never less. An auditor holds no other, only reads,
 * and has a last day.
 */
export const ROLES = ['technician', 'reviewer', 'qa', 'admin', 'auditor'] as const;
export type Role = (typeof ROLES)[number];

export const ROLE_WORDS: Record<Role, string> = {
  technician: 'Technician',
  reviewer: 'Reviewer',
  qa: 'QA',
  admin: 'Admin',
  auditor: 'Auditor',
};
