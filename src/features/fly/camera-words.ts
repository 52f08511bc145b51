import { CAMERAS, type CameraChoice } from '../../stores/cockpit.store.ts';

/** From where the aeroplane is seen. */
export const CAMERA_WORDS: Readonly<Record<CameraChoice, string>> = {
  chase: 'Behind',
  nose: 'Nose',
  tower: 'Tower',
  top: 'Above',
  side: 'Side',
};

export const nextCamera = (camera: CameraChoice): CameraChoice =>
  CAMERAS[(CAMERAS.indexOf(camera) + 1) % CAMERAS.length];
