import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** A mail that committed with a change and is sent after it. */
export interface OutboxMail extends Model<InferAttributes<OutboxMail>, InferCreationAttributes<OutboxMail>> {
  id: CreationOptional<number>;
  toAddress: string;
  subject: string;
  bodyText: string;
  createdAt: Date;
  nextTryAt: Date;
  tries: CreationOptional<number>;
  claimedAt: CreationOptional<Date | null>;
  /** Mark of the sender that has it in hand. */
  claimedBy: CreationOptional<string | null>;
  sentAt: CreationOptional<Date | null>;
  lastError: CreationOptional<string | null>;
  /** Waits to go out with others in one mail a day. */
  digest: CreationOptional<boolean>;
  /** While a mail of a cause is not sent, the same person gets no second one of it. */
  cause: CreationOptional<string | null>;
}

export function defineOutboxMail(sequelize: Sequelize) {
  return sequelize.define<OutboxMail>(
    'OutboxMail',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      toAddress: { type: DataTypes.STRING(254), allowNull: false },
      subject: { type: DataTypes.STRING(300), allowNull: false },
      bodyText: { type: DataTypes.TEXT('long'), allowNull: false },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      nextTryAt: { type: DataTypes.DATE(3), allowNull: false },
      tries: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      claimedAt: { type: DataTypes.DATE(3), allowNull: true },
      claimedBy: { type: DataTypes.STRING(36), allowNull: true },
      sentAt: { type: DataTypes.DATE(3), allowNull: true },
      lastError: { type: DataTypes.STRING(500), allowNull: true },
      digest: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
      cause: { type: DataTypes.STRING(120), allowNull: true },
    },
    { tableName: 'outbox', modelName: 'OutboxMail' },
  );
}
