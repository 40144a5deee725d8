import type { DiscSample } from './colour/disc-sample.ts';
import { isGrey } from './exposure/tone.ts';
import type { Capture, Frame } from './image.ts';
import type { Metric, Warning } from './result.ts';
import type { Registration } from './target/registration.ts';

/** Image pixels a target unit below which edges and discs become short of pixels: the target some 700 px high. Our choice. */
const fewPixelsPerUnit = 0.78;
/** Scale at one side of the target over that at the other: about 8° of tilt at a normal angle of view. Our choice. */
const muchPerspective = 1.12;
/** Spread of the light in the corners, EV, beyond which lens and lamps can't be told apart. Our choice. */
const unevenLight = 0.3;
/** Share of the frame's smaller side by which the field's corners may stick out. */
const cutOff = 0.02;

export function warnOfCapture(capture: Capture): Warning[] {
  const { make, model, exposureTime, iso, software } = capture;
  if ([make, model, exposureTime, iso].every((value) => value === null)) {
    return [
      {
        code: 'no-exif',
        message:
          'The file says nothing of the camera or the exposure (no Exif). Use the file as the camera wrote it.',
      },
    ];
  }
  if (software && !looksLikeFirmware(software, capture)) {
    return [
      {
        code: 'edited-file',
        message: `The file names the program “${software}”, so it may have been edited. Use the file as the camera wrote it.`,
      },
    ];
  }
  return [];
}

/** Cameras put their firmware's version, or their own name, where editors put theirs. */
function looksLikeFirmware(software: string, { make, model }: Capture): boolean {
  const text = software.toLowerCase();
  if ([make, model].some((name) => name && text.includes(name.toLowerCase()))) return true;
  return /^(digital camera )?(firmware|fw|ver(sion)?|v)?[ .:]*\d[\d.a-z]*$/.test(text);
}

export function warnOfRegistration(frame: Frame, registration: Registration): Warning[] {
  const warnings: Warning[] = [];
  const { width, height } = registration.target;
  const scale = (x: number, y: number) => {
    const [a, b, c, d] = registration.jacobian(x, y);
    return Math.sqrt(Math.abs(a * d - b * c));
  };
  if (scale(0, 0) < fewPixelsPerUnit) {
    warnings.push({
      code: 'few-pixels',
      message:
        'The target has few pixels in this picture, so every number is less certain. Go nearer, or use the camera’s full picture size.',
    });
  }
  const across = scale(-width / 3, 0) / scale(width / 3, 0);
  const down = scale(0, -height / 3) / scale(0, height / 3);
  if (Math.max(across, 1 / across, down, 1 / down) > muchPerspective) {
    warnings.push({
      code: 'tilted',
      message:
        'The camera was not square to the target, which passes for unsharp corners. Line up the sensor with the target and photograph again.',
    });
  }
  const slack = cutOff * Math.min(frame.width, frame.height);
  const out = [-1, 1].some((sx) =>
    [-1, 1].some((sy) => {
      const { x, y } = registration.toImage((sx * width) / 2, (sy * height) / 2);
      return x < -slack || y < -slack || x > frame.width + slack || y > frame.height + slack;
    }),
  );
  if (out) {
    warnings.push({
      code: 'target-cut-off',
      message:
        'Part of the target lies outside the frame; what is there was not measured. Go back a little and photograph again.',
    });
  }
  return warnings;
}

export function warnOfGreys(samples: readonly DiscSample[]): Warning[] {
  const clipped = samples.filter((s) => isGrey(s) && s.clipped).map((s) => s.disc.id);
  if (clipped.length === 0) return [];
  return [
    {
      code: 'greys-clipped',
      message: `Not used because they are clipped: ${clipped.join(', ')}. The tone response ends before them; correct the exposure if they should count.`,
    },
  ];
}

export function warnOfLight(shading: readonly Metric[]): Warning[] {
  const asymmetry = shading.find(({ name }) => name === 'shading.asymmetry');
  if (!asymmetry || asymmetry.value <= unevenLight) return [];
  return [
    {
      code: 'uneven-light',
      message: `The light on the target differs by ${asymmetry.value.toFixed(1)} EV from side to side, which passes for shading of the lens. Set the lamps evenly and photograph again.`,
    },
  ];
}
