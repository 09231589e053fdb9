import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** A plate on a bench, from a moment to another. Unique keys keep it open in one place only. */
export interface PlateMount extends Model<InferAttributes<PlateMount>, InferCreationAttributes<PlateMount>> {
  id: CreationOptional<number>;
  plateId: number;
  benchId: number;
  fromAt: Date;
  /** null: it is there until further notice. */
  toAt: Date | null;
  mountedBy: number;
}

export function definePlateMount(sequelize: Sequelize) {
  return sequelize.define<PlateMount>(
    'PlateMount',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      plateId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      benchId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      fromAt: { type: DataTypes.DATE(3), allowNull: false },
      toAt: { type: DataTypes.DATE(3), allowNull: true },
      mountedBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
    },
    { tableName: 'plate_mounts', modelName: 'PlateMount' },
  );
}
