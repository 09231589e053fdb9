import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** A slit plate: the thing itself; what is known of it stands in its certificates. */
export interface Plate extends Model<InferAttributes<Plate>, InferCreationAttributes<Plate>> {
  id: CreationOptional<number>;
  name: string;
  note: string;
  createdBy: number;
  createdAt: Date;
}

export function definePlate(sequelize: Sequelize) {
  return sequelize.define<Plate>(
    'Plate',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      name: { type: DataTypes.STRING(130), allowNull: false },
      note: { type: DataTypes.STRING(300), allowNull: false },
      createdBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'plates', modelName: 'Plate' },
  );
}
