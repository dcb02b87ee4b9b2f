interface DemoLine {
  label: string;
  gaugeAwg: number;
  colour: string;
  lengthMm: number;
  pieces: number;
}

export interface DemoBatch {
  name: string;
  /** Hours from the first start until it is due; null: whenever there is time. */
  dueInHours: number | null;
  priority: number;
  lines: readonly DemoLine[];
}

/** A day's work for the row: every rig has the wire for something in it. */
export const DEMO_BATCHES: readonly DemoBatch[] = [
  {
    name: 'Trainer C',
    dueInHours: 6,
    priority: 2,
    lines: [
      { label: 'bus, long', gaugeAwg: 28, colour: 'YE', lengthMm: 63.5, pieces: 400 },
      { label: 'data', gaugeAwg: 30, colour: 'BU', lengthMm: 84, pieces: 240 },
      { label: 'ground', gaugeAwg: 30, colour: 'BK', lengthMm: 84, pieces: 240 },
    ],
  },
  {
    name: 'Relay frame',
    dueInHours: 26,
    priority: 3,
    lines: [
      { label: 'coil', gaugeAwg: 30, colour: 'GN', lengthMm: 97, pieces: 220 },
      { label: 'supply', gaugeAwg: 30, colour: 'RD', lengthMm: 112, pieces: 180 },
    ],
  },
  {
    name: 'Lamp panel',
    dueInHours: 30,
    priority: 3,
    lines: [{ label: 'lamp returns', gaugeAwg: 30, colour: 'GY', lengthMm: 140, pieces: 96 }],
  },
  {
    name: 'Bench spares',
    dueInHours: null,
    priority: 5,
    lines: [
      { label: '6 inch', gaugeAwg: 30, colour: 'WH', lengthMm: 152.4, pieces: 500 },
      { label: '3 inch', gaugeAwg: 30, colour: 'VT', lengthMm: 76.2, pieces: 150 },
    ],
  },
];
