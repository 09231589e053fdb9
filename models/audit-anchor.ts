import {
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** Where the log stood on a day. */
export interface AuditAnchor extends Model<
  InferAttributes<AuditAnchor>,
  InferCreationAttributes<AuditAnchor>
> {
  /** Calendar date in UTC, yyyy-mm-dd. */
  day: string;
  lastId: number;
  hash: string;
  madeAt: Date;
}

export function defineAuditAnchor(sequelize: Sequelize) {
  return sequelize.define<AuditAnchor>(
    'AuditAnchor',
    {
      day: { type: DataTypes.DATEONLY, allowNull: false, primaryKey: true },
      lastId: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false },
      hash: { type: DataTypes.STRING(64), allowNull: false },
      madeAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'audit_anchors', modelName: 'AuditAnchor' },
  );
}
