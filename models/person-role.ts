import {
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { Role } from '@/lib/domain/roles';

/** A role a person holds. */
export interface PersonRole extends Model<InferAttributes<PersonRole>, InferCreationAttributes<PersonRole>> {
  personId: number;
  role: Role;
}

export function definePersonRole(sequelize: Sequelize) {
  return sequelize.define<PersonRole>(
    'PersonRole',
    {
      personId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, primaryKey: true },
      role: { type: DataTypes.STRING(20), allowNull: false, primaryKey: true },
    },
    { tableName: 'person_roles', modelName: 'PersonRole' },
  );
}
