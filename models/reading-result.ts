import {
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** The whole result of a reading, curves included, apart so that lists stay light. */
export interface ReadingResultRow extends Model<
  InferAttributes<ReadingResultRow>,
  InferCreationAttributes<ReadingResultRow>
> {
  readingId: number;
  stripJson: string;
  resultJson: string;
}

export function defineReadingResult(sequelize: Sequelize) {
  return sequelize.define<ReadingResultRow>(
    'ReadingResultRow',
    {
      readingId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, primaryKey: true },
      stripJson: { type: DataTypes.TEXT('long'), allowNull: false },
      resultJson: { type: DataTypes.TEXT('long'), allowNull: false },
    },
    { tableName: 'reading_results', modelName: 'ReadingResultRow' },
  );
}
