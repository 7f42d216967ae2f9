/** Why one BUFR message cannot be read; the file may hold others that can. */
export class BufrError extends Error {
  constructor(message: string) {
    super(message)
    this.name = 'BufrError'
  }
}
