/** A row-major interleaved RGB picture as stored, with the way from its codes to linear light. See README.md for conventions. */
export interface Frame {
  readonly width: number;
  readonly height: number;
  /** Interleaved R, G, B codes: (row * width + col) * 3 + channel. */
  readonly data: Uint8Array | Uint16Array;
  /** 255 or 65535. */
  readonly maxCode: number;
  /** Code → linear light 0…1 in the file's own primaries, one table a channel (they may be the same array). */
  readonly toLinear: readonly [Float32Array, Float32Array, Float32Array];
  /** Row-major 3 × 3 from the file's linear primaries to linear sRGB (D65); null when they are sRGB's already. */
  readonly toSrgb: readonly number[] | null;
  /** JPEG only: the steps to which compression rounds the mean of a flat 8 × 8 block, in codes of luma and of chroma. */
  readonly blockStep?: { readonly luma: number; readonly chroma: number };
  /** Colour was stored at half the resolution (4:2:0, 4:2:2). */
  readonly chromaHalved?: boolean;
}

/** One plane of linear light, row-major: (row, col) is data[row * width + col]. */
export interface Plane {
  readonly width: number;
  readonly height: number;
  readonly data: Float32Array;
}

export interface Point {
  readonly x: number;
  readonly y: number;
}

/** What the file's metadata says of the exposure. Values that are absent or impossible are null. */
export interface Capture {
  make: string | null;
  model: string | null;
  serial: string | null;
  /** Seconds. */
  exposureTime: number | null;
  fNumber: number | null;
  iso: number | null;
  /** EV dialled in. */
  exposureBias: number | null;
  /** Millimetres. */
  focalLength: number | null;
  /** As the camera wrote it, no zone: 2026-03-14T10:22:31(.sss). */
  takenAt: string | null;
  /** Exif ExposureProgram in words: manual, program, aperture-priority, shutter-priority, creative, action, portrait, landscape. */
  program: string | null;
  flash: boolean | null;
  software: string | null;
}
