// A 16-bit grey TIFF with its tone curve named: baseline, uncompressed, Gray Gamma 2.2 profile.
// Layout after the TIFF 6.0 specification (1992); the profile after ICC.1:2001-04 (version 2).

/** Version 2 ICC profile for a grey device with a plain gamma of 2.2 and the D50 white. */
export function grayGamma22() {
  const name = "Gray Gamma 2.2";
  const note = "No copyright, use freely";
  const desc = Buffer.alloc(90 + name.length + 1);
  desc.write("desc");
  desc.writeUInt32BE(name.length + 1, 8);
  desc.write(name, 12);
  const cprt = Buffer.alloc(8 + note.length + 1);
  cprt.write("text");
  cprt.write(note, 8);
  const wtpt = Buffer.alloc(20);
  wtpt.write("XYZ ");
  [63190, 65536, 54061].forEach((v, i) => {
    wtpt.writeUInt32BE(v, 8 + i * 4);
  });
  const ktrc = Buffer.alloc(14);
  ktrc.write("curv");
  ktrc.writeUInt32BE(1, 8);
  ktrc.writeUInt16BE(Math.round(2.2 * 256), 12);
  const tags = [
    ["desc", desc],
    ["cprt", cprt],
    ["wtpt", wtpt],
    ["kTRC", ktrc],
  ];
  const head = Buffer.alloc(132 + tags.length * 12);
  const body = [];
  let at = head.length;
  head.writeUInt32BE(tags.length, 128);
  tags.forEach(([sig, data], i) => {
    head.write(sig, 132 + i * 12);
    head.writeUInt32BE(at, 136 + i * 12);
    head.writeUInt32BE(data.length, 140 + i * 12);
    const padded = Buffer.concat([data, Buffer.alloc((4 - (data.length % 4)) % 4)]);
    body.push(padded);
    at += padded.length;
  });
  head.writeUInt32BE(at, 0);
  head.writeUInt32BE(0x02100000, 8);
  head.write("mntrGRAYXYZ ", 12);
  [2026, 1, 1, 0, 0, 0].forEach((v, i) => {
    head.writeUInt16BE(v, 24 + i * 2);
  });
  head.write("acsp", 36);
  [63190, 65536, 54061].forEach((v, i) => {
    head.writeUInt32BE(v, 68 + i * 4);
  });
  return Buffer.concat([head, ...body]);
}

const SHORT = 3;
const LONG = 4;
const RATIONAL = 5;
const UNDEFINED = 7;

/**
 * A file laid out and ready for its picture: header, directory and profile are written, and `samples` is the
 * place in the file where the picture goes, row after row.
 * @returns {{ file: Uint8Array<ArrayBuffer>, samples: Uint16Array<ArrayBuffer> }}
 */
export function layTiff(width, height, dpi) {
  const icc = grayGamma22();
  const rowsPerStrip = Math.max(1, Math.floor((1 << 20) / (width * 2)));
  const strips = Math.ceil(height / rowsPerStrip);
  const entries = 13;
  // header, directory, then the values too long for it, then the picture
  const ifd = 8;
  const resolution = ifd + 2 + entries * 12 + 4;
  const offsets = resolution + 8;
  const counts = offsets + strips * 4;
  const profile = counts + strips * 4;
  const pixels = (profile + icc.length + 15) & ~15;
  const length = width * height * 2;
  const file = new Uint8Array(pixels + length);
  const view = new DataView(file.buffer);
  file.set([0x49, 0x49, 42, 0], 0);
  view.setUint32(4, ifd, true);
  view.setUint32(resolution, Math.round(dpi * 100), true);
  view.setUint32(resolution + 4, 100, true);
  for (let i = 0; i < strips; i++) {
    const rows = Math.min(rowsPerStrip, height - i * rowsPerStrip);
    view.setUint32(offsets + i * 4, pixels + i * rowsPerStrip * width * 2, true);
    view.setUint32(counts + i * 4, rows * width * 2, true);
  }
  file.set(icc, profile);
  const one = strips === 1;
  const table = [
    [256, LONG, 1, width],
    [257, LONG, 1, height],
    [258, SHORT, 1, 16],
    [259, SHORT, 1, 1],
    [262, SHORT, 1, 1],
    [273, LONG, strips, one ? pixels : offsets],
    [277, SHORT, 1, 1],
    [278, LONG, 1, rowsPerStrip],
    [279, LONG, strips, one ? length : counts],
    [282, RATIONAL, 1, resolution],
    [283, RATIONAL, 1, resolution],
    [296, SHORT, 1, 2],
    [34675, UNDEFINED, icc.length, profile],
  ];
  view.setUint16(ifd, table.length, true);
  table.forEach(([tag, type, count, value], i) => {
    const p = ifd + 2 + i * 12;
    view.setUint16(p, tag, true);
    view.setUint16(p + 2, type, true);
    view.setUint32(p + 4, count, true);
    if (type === SHORT) view.setUint16(p + 8, value, true);
    else view.setUint32(p + 8, value, true);
  });
  // the file is little-endian, as is every machine Node runs on that has been tried here
  return { file, samples: new Uint16Array(file.buffer, pixels, width * height) };
}
