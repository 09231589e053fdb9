import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** A password that was wrong; a right one clears those of its e-mail. */
export interface SignInAttempt extends Model<
  InferAttributes<SignInAttempt>,
  InferCreationAttributes<SignInAttempt>
> {
  id: CreationOptional<number>;
  email: string;
  address: string;
  at: Date;
}

export function defineSignInAttempt(sequelize: Sequelize) {
  return sequelize.define<SignInAttempt>(
    'SignInAttempt',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      email: { type: DataTypes.STRING(254), allowNull: false },
      address: { type: DataTypes.STRING(64), allowNull: false },
      at: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'sign_in_attempts', modelName: 'SignInAttempt' },
  );
}
