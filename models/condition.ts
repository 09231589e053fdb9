import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** Air and temperature of a bench from a moment on, or of one frame. Never updated. */
export interface ConditionRow extends Model<
  InferAttributes<ConditionRow>,
  InferCreationAttributes<ConditionRow>
> {
  id: CreationOptional<number>;
  benchId: number;
  frameId: number | null;
  airTemperatureC: number | null;
  airTemperatureHalfC: number | null;
  pressurePa: number | null;
  pressureHalfPa: number | null;
  humidityPercent: number | null;
  humidityHalfPercent: number | null;
  co2Ppm: number | null;
  co2HalfPpm: number | null;
  sourceTemperatureC: number | null;
  sourceTemperatureHalfC: number | null;
  enteredBy: number;
  enteredAt: Date;
}

export function defineCondition(sequelize: Sequelize) {
  // One object each: the library writes the column's name into it.
  const maybe = () => ({ type: DataTypes.DOUBLE, allowNull: true });
  return sequelize.define<ConditionRow>(
    'Condition',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      benchId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      frameId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      airTemperatureC: maybe(),
      airTemperatureHalfC: maybe(),
      pressurePa: maybe(),
      pressureHalfPa: maybe(),
      humidityPercent: maybe(),
      humidityHalfPercent: maybe(),
      co2Ppm: maybe(),
      co2HalfPpm: maybe(),
      sourceTemperatureC: maybe(),
      sourceTemperatureHalfC: maybe(),
      enteredBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      enteredAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'conditions', modelName: 'Condition' },
  );
}
