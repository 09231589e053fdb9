import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { ReturnReason } from '@/lib/domain/views';

/** Why a reading went back to the technician. */
export interface ReturnRow extends Model<InferAttributes<ReturnRow>, InferCreationAttributes<ReturnRow>> {
  id: CreationOptional<number>;
  readingId: number;
  reason: ReturnReason;
  words: string;
  returnedBy: number;
  returnedAt: Date;
}

export function defineReturn(sequelize: Sequelize) {
  return sequelize.define<ReturnRow>(
    'ReturnRow',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      readingId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      reason: { type: DataTypes.STRING(30), allowNull: false },
      words: { type: DataTypes.STRING(1000), allowNull: false },
      returnedBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      returnedAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'returns', modelName: 'ReturnRow' },
  );
}
