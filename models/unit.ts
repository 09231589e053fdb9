import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** One unit of a lot. */
export interface Unit extends Model<InferAttributes<Unit>, InferCreationAttributes<Unit>> {
  id: CreationOptional<number>;
  lotId: number;
  serial: string;
  addedAt: Date;
}

export function defineUnit(sequelize: Sequelize) {
  return sequelize.define<Unit>(
    'Unit',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      lotId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      serial: { type: DataTypes.STRING(60), allowNull: false },
      addedAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'units', modelName: 'Unit' },
  );
}
