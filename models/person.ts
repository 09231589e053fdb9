import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** Somebody who can sign in. Raising `sessionVersion` ends every session they have. */
export interface Person extends Model<InferAttributes<Person>, InferCreationAttributes<Person>> {
  id: CreationOptional<number>;
  name: string;
  email: string;
  passwordHash: string;
  active: CreationOptional<boolean>;
  sessionVersion: CreationOptional<number>;
  lastSignInAt: CreationOptional<Date | null>;
  createdAt: Date;
  /** Notices come together once a day. */
  mailDaily: CreationOptional<boolean>;
  /** The last moment they may sign in; null: without end. */
  accessUntil: CreationOptional<Date | null>;
}

export function definePerson(sequelize: Sequelize) {
  return sequelize.define<Person>(
    'Person',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      name: { type: DataTypes.STRING(80), allowNull: false },
      email: { type: DataTypes.STRING(254), allowNull: false },
      passwordHash: { type: DataTypes.STRING(255), allowNull: false },
      active: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: true },
      sessionVersion: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      lastSignInAt: { type: DataTypes.DATE(3), allowNull: true },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      mailDaily: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
      accessUntil: { type: DataTypes.DATE(3), allowNull: true },
    },
    { tableName: 'people', modelName: 'Person' },
  );
}
