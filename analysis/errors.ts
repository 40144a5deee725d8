/** Thrown when a file as a whole can't be measured. The message names what was found and what to do. */
export class MeasurementError extends Error {
  readonly code: string;

  constructor(code: string, message: string) {
    super(message);
    this.name = 'MeasurementError';
    this.code = code;
  }
}
