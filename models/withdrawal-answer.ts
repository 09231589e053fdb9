import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { WithdrawalAnswerWord } from '@/lib/domain/withdrawal';

/** The second person’s word on a proposed withdrawal. */
export interface WithdrawalAnswer extends Model<
  InferAttributes<WithdrawalAnswer>,
  InferCreationAttributes<WithdrawalAnswer>
> {
  id: CreationOptional<number>;
  proposalId: number;
  answer: WithdrawalAnswerWord;
  words: string;
  answeredBy: number;
  answeredAt: Date;
}

export function defineWithdrawalAnswer(sequelize: Sequelize) {
  return sequelize.define<WithdrawalAnswer>(
    'WithdrawalAnswer',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      proposalId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      answer: { type: DataTypes.STRING(12), allowNull: false },
      words: { type: DataTypes.STRING(1000), allowNull: false },
      answeredBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      answeredAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'withdrawal_answers', modelName: 'WithdrawalAnswer' },
  );
}
