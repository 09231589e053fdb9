import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** The reviewer's word on a finding that asked for one. */
export interface LookAnswer extends Model<InferAttributes<LookAnswer>, InferCreationAttributes<LookAnswer>> {
  id: CreationOptional<number>;
  readingId: number;
  checkName: string;
  answer: string;
  reason: string;
  answeredBy: number;
  answeredAt: Date;
}

export function defineLookAnswer(sequelize: Sequelize) {
  return sequelize.define<LookAnswer>(
    'LookAnswer',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      readingId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      checkName: { type: DataTypes.STRING(60), allowNull: false },
      answer: { type: DataTypes.STRING(20), allowNull: false },
      reason: { type: DataTypes.STRING(1000), allowNull: false },
      answeredBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      answeredAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'look_answers', modelName: 'LookAnswer' },
  );
}
