import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { Role } from '@/lib/domain/roles';

/** Who accepted a reading, in which role, meaning what, over which digest. */
export interface Signature extends Model<InferAttributes<Signature>, InferCreationAttributes<Signature>> {
  id: CreationOptional<number>;
  readingId: number;
  personId: number;
  personName: string;
  role: Role;
  meaning: string;
  signedAt: Date;
  digest: string;
  /** When the password that signs was typed; null: at the moment of signing. */
  passwordAt: CreationOptional<Date | null>;
}

export function defineSignature(sequelize: Sequelize) {
  return sequelize.define<Signature>(
    'Signature',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      readingId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      personId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      personName: { type: DataTypes.STRING(80), allowNull: false },
      role: { type: DataTypes.STRING(20), allowNull: false },
      meaning: { type: DataTypes.STRING(300), allowNull: false },
      signedAt: { type: DataTypes.DATE(3), allowNull: false },
      digest: { type: DataTypes.STRING(64), allowNull: false },
      passwordAt: { type: DataTypes.DATE(3), allowNull: true },
    },
    { tableName: 'signatures', modelName: 'Signature' },
  );
}
