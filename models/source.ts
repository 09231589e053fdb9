import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** A source with a published wavelength, for reference checks. */
export interface Source extends Model<InferAttributes<Source>, InferCreationAttributes<Source>> {
  id: CreationOptional<number>;
  name: string;
  vacuumNm: number;
  uNm: number;
  note: string;
  createdBy: number;
  createdAt: Date;
}

export function defineSource(sequelize: Sequelize) {
  return sequelize.define<Source>(
    'Source',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      name: { type: DataTypes.STRING(60), allowNull: false },
      vacuumNm: { type: DataTypes.DOUBLE, allowNull: false },
      uNm: { type: DataTypes.DOUBLE, allowNull: false },
      note: { type: DataTypes.STRING(300), allowNull: false },
      createdBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'sources', modelName: 'Source' },
  );
}
