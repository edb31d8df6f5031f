import { DataTypes, Model, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { ROLES, type Role } from '#shared/permissions.ts'

/** One role of one person at one site. */
export class UserRole extends Model<InferAttributes<UserRole>, InferCreationAttributes<UserRole>> {
  declare userId: string
  declare siteId: string
  declare role: Role
}

export function defineUserRole(sequelize: Sequelize): void {
  UserRole.init(
    {
      userId: { type: DataTypes.UUID, primaryKey: true, allowNull: false },
      siteId: { type: DataTypes.UUID, primaryKey: true, allowNull: false },
      role: { type: DataTypes.ENUM(...ROLES), primaryKey: true, allowNull: false },
    },
    { sequelize, tableName: 'user_roles', underscored: true, timestamps: false },
  )
}
