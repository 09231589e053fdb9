import {
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** A fact the product keeps about itself. */
export interface Setting extends Model<InferAttributes<Setting>, InferCreationAttributes<Setting>> {
  name: string;
  valueJson: string;
  changedAt: Date;
}

export function defineSetting(sequelize: Sequelize) {
  return sequelize.define<Setting>(
    'Setting',
    {
      name: { type: DataTypes.STRING(60), allowNull: false, primaryKey: true },
      valueJson: { type: DataTypes.TEXT('long'), allowNull: false },
      changedAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'settings', modelName: 'Setting' },
  );
}
