import {
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** A person named in a comment. */
export interface CommentMention extends Model<
  InferAttributes<CommentMention>,
  InferCreationAttributes<CommentMention>
> {
  commentId: number;
  personId: number;
}

export function defineCommentMention(sequelize: Sequelize) {
  return sequelize.define<CommentMention>(
    'CommentMention',
    {
      commentId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, primaryKey: true },
      personId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, primaryKey: true },
    },
    { tableName: 'comment_mentions', modelName: 'CommentMention' },
  );
}
