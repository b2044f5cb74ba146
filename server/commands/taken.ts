import { isDuplicate } from '../database/violations.js'
import { AppError } from '../errors.js'

/**
 * Runs `write`; a row that a unique name refuses becomes an error beside that field. The database
 * decides, so that two people who write the same name at once cannot both pass.
 * @throws AppError `taken`
 */
export async function orTaken<T>(
  write: () => Promise<T>,
  message: string,
  field = 'name',
): Promise<T> {
  try {
    return await write()
  } catch (error) {
    if (!isDuplicate(error)) throw error
    throw new AppError('taken', message, { fields: { [field]: message } })
  }
}
