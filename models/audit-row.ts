import {
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** One change: who, when, what, before and after, chained to the row before it. */
export interface AuditRow extends Model<InferAttributes<AuditRow>, InferCreationAttributes<AuditRow>> {
  id: number;
  at: Date;
  personId: number | null;
  who: string;
  action: string;
  subjectKind: string;
  subjectId: number | null;
  subject: string;
  beforeJson: string;
  afterJson: string;
  previousHash: string;
  hash: string;
}

export function defineAuditRow(sequelize: Sequelize) {
  return sequelize.define<AuditRow>(
    'AuditRow',
    {
      id: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false, primaryKey: true },
      at: { type: DataTypes.DATE(3), allowNull: false },
      personId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      who: { type: DataTypes.STRING(80), allowNull: false },
      action: { type: DataTypes.STRING(40), allowNull: false },
      subjectKind: { type: DataTypes.STRING(20), allowNull: false },
      subjectId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      subject: { type: DataTypes.STRING(300), allowNull: false },
      beforeJson: { type: DataTypes.TEXT('long'), allowNull: false },
      afterJson: { type: DataTypes.TEXT('long'), allowNull: false },
      previousHash: { type: DataTypes.STRING(64), allowNull: false },
      hash: { type: DataTypes.STRING(64), allowNull: false },
    },
    { tableName: 'audit_rows', modelName: 'AuditRow' },
  );
}
