/** Thrown by a page or a loader that has nothing at its address. */
export class Absent extends Error {
  override readonly name = 'Absent';

  constructor() {
    super('Nothing at this address');
  }
}
