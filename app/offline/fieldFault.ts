/** Why something could not be done on this device. Screens word them (i18n walk.sync.fault.*). */
export const FIELD_FAULTS = {
  deviceFull: 'This device is full: nothing more can be kept on it. Free some space, then enter it again; what was written before is kept.',
  storageShut: 'The browser does not let Smoothside keep anything here (private window, or storage switched off). Open it in an ordinary window.',
  notReady: 'The job is not open on this device yet. Wait until it is, then enter it again.',
  notPicture: 'This is no picture that can be read. Take a photo, or choose a JPEG, PNG, WebP or HEIC picture.',
  pictureUnread: 'This picture cannot be opened on this device. Take the photo with Smoothside, or choose it as JPEG.',
  pictureTooLarge: 'This file is larger than 60 MB. Choose a smaller picture.',
} as const
export type FieldFaultCode = keyof typeof FIELD_FAULTS

/** Thrown where a device cannot keep or make something. */
export class FieldFault extends Error {
  override readonly name = 'FieldFault'
  /** `found` is what a file turned out to be, where that is known. */
  constructor(readonly code: FieldFaultCode, readonly found: string | null = null) {
    super(FIELD_FAULTS[code])
  }
}

/** What the browser's storage threw, as ours: a full device and a shut storage each have their own sentence; the rest goes on as it is. */
export function storageFault(error: unknown): unknown {
  const names = [error, (error as { inner?: unknown } | null)?.inner].map(one => (one as { name?: string } | null)?.name)
  if (names.includes('QuotaExceededError')) return new FieldFault('deviceFull')
  if (names.some(name => name === 'MissingAPIError' || name === 'SecurityError' || name === 'InvalidStateError')) return new FieldFault('storageShut')
  return error
}
