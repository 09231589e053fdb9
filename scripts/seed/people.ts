import type { Role } from '@/lib/domain/roles';

/** The demo's accounts, all invented. One password for all: it is printed when the product starts. */
export const DEMO_PASSWORD = 'two slits, one light';

export const DEMO_PEOPLE: { name: string; email: string; roles: Role[] }[] = [
  { name: 'Admin 1', email: 'admin@demo.example', roles: ['admin'] },
  { name: 'Technician 1', email: 'technician@demo.example', roles: ['technician'] },
  { name: 'Technician 2', email: 'technician2@demo.example', roles: ['technician'] },
  { name: 'Reviewer 1', email: 'reviewer@demo.example', roles: ['reviewer'] },
  { name: 'Reviewer 2', email: 'reviewer2@demo.example', roles: ['reviewer', 'technician'] },
  { name: 'QA 1', email: 'qa@demo.example', roles: ['qa'] },
];
