import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { Outcome } from '@/lib/domain/views';

/** What became of a unit; the newest row stands. */
export interface UnitOutcome extends Model<
  InferAttributes<UnitOutcome>,
  InferCreationAttributes<UnitOutcome>
> {
  id: CreationOptional<number>;
  unitId: number;
  outcome: Outcome;
  reason: string;
  setBy: number;
  setAt: Date;
}

export function defineUnitOutcome(sequelize: Sequelize) {
  return sequelize.define<UnitOutcome>(
    'UnitOutcome',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      unitId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      outcome: { type: DataTypes.STRING(20), allowNull: false },
      reason: { type: DataTypes.STRING(1000), allowNull: false },
      setBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      setAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'unit_outcomes', modelName: 'UnitOutcome' },
  );
}
