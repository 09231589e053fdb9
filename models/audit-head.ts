import {
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** The end of the chain: the one row every writer of the log locks last. */
export interface AuditHead extends Model<InferAttributes<AuditHead>, InferCreationAttributes<AuditHead>> {
  id: number;
  lastId: number;
  hash: string;
}

export function defineAuditHead(sequelize: Sequelize) {
  return sequelize.define<AuditHead>(
    'AuditHead',
    {
      id: { type: DataTypes.TINYINT.UNSIGNED, allowNull: false, primaryKey: true },
      lastId: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false },
      hash: { type: DataTypes.STRING(64), allowNull: false },
    },
    { tableName: 'audit_head', modelName: 'AuditHead' },
  );
}
