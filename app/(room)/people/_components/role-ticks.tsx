'use client';

import { Tick } from '@/components/ui/field';
import { ROLE_WORDS, ROLES, type Role } from '@/lib/domain/roles';

interface Props {
  roles: readonly Role[];
  onChange: (roles: Role[]) => void;
  error?: string;
}

/** What a person may do is the union of their roles; an auditor only reads. */
export function RoleTicks({ roles, onChange, error }: Props) {
  return (
    <fieldset>
      <legend className="label">Roles</legend>
      <div className="flex flex-wrap gap-x-6">
        {ROLES.map((role) => (
          <Tick
            key={role}
            label={ROLE_WORDS[role]}
            checked={roles.includes(role)}
            onChange={(event) =>
              onChange(event.target.checked ? [...roles, role] : roles.filter((r) => r !== role))
            }
          />
        ))}
      </div>
      {error ? <p className="help wrong">{error}</p> : null}
    </fieldset>
  );
}
