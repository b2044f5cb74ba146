import { ForeignKeyConstraintError, UniqueConstraintError } from 'sequelize'

/** Did a unique key refuse the row? */
export function isDuplicate(error: unknown): boolean {
  return error instanceof UniqueConstraintError
}

/** Did a foreign key refuse the row: it points to nothing, or something still points to it? */
export function isForeignKey(error: unknown): boolean {
  return error instanceof ForeignKeyConstraintError
}
