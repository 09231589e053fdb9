import {
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** When a person last typed the right password to sign in one session. */
export interface PasswordProof extends Model<
  InferAttributes<PasswordProof>,
  InferCreationAttributes<PasswordProof>
> {
  personId: number;
  sessionId: string;
  at: Date;
}

export function definePasswordProof(sequelize: Sequelize) {
  return sequelize.define<PasswordProof>(
    'PasswordProof',
    {
      personId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, primaryKey: true },
      sessionId: { type: DataTypes.STRING(36), allowNull: false, primaryKey: true },
      at: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'password_proofs', modelName: 'PasswordProof' },
  );
}
