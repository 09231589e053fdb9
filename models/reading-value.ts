import {
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** The value of a reading as it is judged, with its budget and what drawing it gave. Never updated. */
export interface ReadingValueRow extends Model<
  InferAttributes<ReadingValueRow>,
  InferCreationAttributes<ReadingValueRow>
> {
  readingId: number;
  valueJson: string;
  monteCarloJson: string | null;
}

export function defineReadingValue(sequelize: Sequelize) {
  return sequelize.define<ReadingValueRow>(
    'ReadingValue',
    {
      readingId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, primaryKey: true },
      valueJson: { type: DataTypes.TEXT('medium'), allowNull: false },
      monteCarloJson: { type: DataTypes.TEXT, allowNull: true },
    },
    { tableName: 'reading_values', modelName: 'ReadingValue' },
  );
}
