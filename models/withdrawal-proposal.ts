import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** Somebody asks for an accepted reading to be withdrawn. */
export interface WithdrawalProposal extends Model<
  InferAttributes<WithdrawalProposal>,
  InferCreationAttributes<WithdrawalProposal>
> {
  id: CreationOptional<number>;
  readingId: number;
  reason: string;
  proposedBy: number;
  proposedAt: Date;
}

export function defineWithdrawalProposal(sequelize: Sequelize) {
  return sequelize.define<WithdrawalProposal>(
    'WithdrawalProposal',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      readingId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      reason: { type: DataTypes.STRING(1000), allowNull: false },
      proposedBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      proposedAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'withdrawal_proposals', modelName: 'WithdrawalProposal' },
  );
}
