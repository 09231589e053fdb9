import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** A reset link: only the hash of its token is kept. */
export interface PasswordReset extends Model<
  InferAttributes<PasswordReset>,
  InferCreationAttributes<PasswordReset>
> {
  id: CreationOptional<number>;
  personId: number;
  tokenHash: string;
  createdAt: Date;
  expiresAt: Date;
  usedAt: CreationOptional<Date | null>;
}

export function definePasswordReset(sequelize: Sequelize) {
  return sequelize.define<PasswordReset>(
    'PasswordReset',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      personId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      tokenHash: { type: DataTypes.STRING(64), allowNull: false },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      expiresAt: { type: DataTypes.DATE(3), allowNull: false },
      usedAt: { type: DataTypes.DATE(3), allowNull: true },
    },
    { tableName: 'password_resets', modelName: 'PasswordReset' },
  );
}
