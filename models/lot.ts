import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** A lot of units made to one specification. */
export interface Lot extends Model<InferAttributes<Lot>, InferCreationAttributes<Lot>> {
  id: CreationOptional<number>;
  number: string;
  specificationId: number;
  supplier: string;
  openedBy: number;
  openedAt: Date;
  closedAt: CreationOptional<Date | null>;
}

export function defineLot(sequelize: Sequelize) {
  return sequelize.define<Lot>(
    'Lot',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      number: { type: DataTypes.STRING(40), allowNull: false },
      specificationId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      supplier: { type: DataTypes.STRING(120), allowNull: false },
      openedBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      openedAt: { type: DataTypes.DATE(3), allowNull: false },
      closedAt: { type: DataTypes.DATE(3), allowNull: true },
    },
    { tableName: 'lots', modelName: 'Lot' },
  );
}
