import bwipjs from 'bwip-js/node';

/** A QR code (ISO/IEC 18004) of `text` as an SVG drawing in black. Throws when the text does not fit. */
export function qrCodeSvg(text: string): string {
  return bwipjs.toSVG({ bcid: 'qrcode', text, scale: 2 });
}
