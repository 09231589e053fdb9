import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { ReadingState } from '@/lib/domain/life-cycle';

/** Where a reading stands. Changed only by a conditional update on id, status and version. */
export interface ReadingStateRow extends Model<
  InferAttributes<ReadingStateRow>,
  InferCreationAttributes<ReadingStateRow>
> {
  readingId: number;
  frameId: number;
  benchId: number;
  status: ReadingState;
  version: CreationOptional<number>;
  changedAt: Date;
  sentBy: CreationOptional<number | null>;
  sentAt: CreationOptional<Date | null>;
  note: CreationOptional<string>;
  risk: CreationOptional<number>;
  acceptedAt: CreationOptional<Date | null>;
}

export function defineReadingState(sequelize: Sequelize) {
  return sequelize.define<ReadingStateRow>(
    'ReadingStateRow',
    {
      readingId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, primaryKey: true },
      frameId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      benchId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      status: { type: DataTypes.STRING(12), allowNull: false },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      changedAt: { type: DataTypes.DATE(3), allowNull: false },
      sentBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      sentAt: { type: DataTypes.DATE(3), allowNull: true },
      note: { type: DataTypes.STRING(1000), allowNull: false, defaultValue: '' },
      risk: { type: DataTypes.DOUBLE, allowNull: false, defaultValue: 0 },
      acceptedAt: { type: DataTypes.DATE(3), allowNull: true },
    },
    { tableName: 'reading_states', modelName: 'ReadingStateRow' },
  );
}
