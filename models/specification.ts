import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { DecisionRule, Medium, Method } from '@/lib/domain/specification';

/** What a unit must meet. Never edited, only retired. */
export interface SpecificationRow extends Model<
  InferAttributes<SpecificationRow>,
  InferCreationAttributes<SpecificationRow>
> {
  id: CreationOptional<number>;
  name: string;
  nominalNm: number;
  medium: Medium;
  lowerNm: number | null;
  upperNm: number | null;
  decisionRule: DecisionRule;
  ownGuardNm: number | null;
  ratio: number;
  halfToleranceNm: number;
  /** Temperature of the unit the limits hold at; null: any. */
  atTemperatureC: CreationOptional<number | null>;
  nmPerK: CreationOptional<number | null>;
  uNmPerK: CreationOptional<number | null>;
  /** null: as the bench is used. */
  method: CreationOptional<Method | null>;
  createdBy: number;
  createdAt: Date;
  retiredAt: CreationOptional<Date | null>;
}

export function defineSpecification(sequelize: Sequelize) {
  return sequelize.define<SpecificationRow>(
    'SpecificationRow',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      name: { type: DataTypes.STRING(80), allowNull: false },
      nominalNm: { type: DataTypes.DOUBLE, allowNull: false },
      medium: { type: DataTypes.STRING(10), allowNull: false },
      lowerNm: { type: DataTypes.DOUBLE, allowNull: true },
      upperNm: { type: DataTypes.DOUBLE, allowNull: true },
      decisionRule: { type: DataTypes.STRING(20), allowNull: false },
      ownGuardNm: { type: DataTypes.DOUBLE, allowNull: true },
      ratio: { type: DataTypes.DOUBLE, allowNull: false },
      halfToleranceNm: { type: DataTypes.DOUBLE, allowNull: false },
      atTemperatureC: { type: DataTypes.DOUBLE, allowNull: true },
      nmPerK: { type: DataTypes.DOUBLE, allowNull: true },
      uNmPerK: { type: DataTypes.DOUBLE, allowNull: true },
      method: { type: DataTypes.STRING(12), allowNull: true },
      createdBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
      retiredAt: { type: DataTypes.DATE(3), allowNull: true },
    },
    { tableName: 'specifications', modelName: 'SpecificationRow' },
  );
}
