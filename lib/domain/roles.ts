/** The four roles. A person may hold several; what a person may do is the union, never less. */
export const ROLES = ['technician', 'reviewer', 'qa', 'admin'] as const;
export type Role = (typeof ROLES)[number];

export const ROLE_WORDS: Record<Role, string> = {
  technician: 'Technician',
  reviewer: 'Reviewer',
  qa: 'QA',
  admin: 'Admin',
};
