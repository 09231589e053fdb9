import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** A fixed set-up: source mount, slit plate, distance, camera. */
export interface Bench extends Model<InferAttributes<Bench>, InferCreationAttributes<Bench>> {
  id: CreationOptional<number>;
  name: string;
  note: string;
  createdBy: number;
  createdAt: Date;
}

export function defineBench(sequelize: Sequelize) {
  return sequelize.define<Bench>(
    'Bench',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      name: { type: DataTypes.STRING(60), allowNull: false },
      note: { type: DataTypes.STRING(1000), allowNull: false },
      createdBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'benches', modelName: 'Bench' },
  );
}
