import bcrypt from 'bcryptjs'

export interface PasswordHasher {
  hash(password: string): Promise<string>
  verify(password: string, hash: string): Promise<boolean>
  close(): Promise<void>
}

export function createPasswordHasher(cost: number): PasswordHasher {
  return {
    hash: (password) => bcrypt.hash(password, cost),
    verify: (password, hash) => bcrypt.compare(password, hash),
    close: async () => {},
  }
}
