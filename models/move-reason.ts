import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** Why a person moved a reading's value away from the frame's first fit. */
export interface MoveReason extends Model<InferAttributes<MoveReason>, InferCreationAttributes<MoveReason>> {
  id: CreationOptional<number>;
  readingId: number;
  words: string;
  givenBy: number;
  givenAt: Date;
}

export function defineMoveReason(sequelize: Sequelize) {
  return sequelize.define<MoveReason>(
    'MoveReason',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      readingId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      words: { type: DataTypes.STRING(1000), allowNull: false },
      givenBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      givenAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'move_reasons', modelName: 'MoveReason' },
  );
}
