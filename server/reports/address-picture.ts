import qrcode from 'qrcode';

/** An address as a two-dimensional code to hold a telephone to; SVG. */
export function addressPicture(address: string): Promise<string> {
  return qrcode.toString(address, { type: 'svg', margin: 2, errorCorrectionLevel: 'M' });
}
