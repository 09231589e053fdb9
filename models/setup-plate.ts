import {
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** Which plate a setup picks, and the certificate its copy of the values comes from. */
export interface SetupPlate extends Model<InferAttributes<SetupPlate>, InferCreationAttributes<SetupPlate>> {
  setupId: number;
  plateId: number;
  certificateId: number;
}

export function defineSetupPlate(sequelize: Sequelize) {
  return sequelize.define<SetupPlate>(
    'SetupPlate',
    {
      setupId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, primaryKey: true },
      plateId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      certificateId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    },
    { tableName: 'setup_plates', modelName: 'SetupPlate' },
  );
}
