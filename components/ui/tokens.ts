/** The design's values: two themes of one drawing, and the scales they share. Colours are used through theme.ts. */
export const themes = {
  paper: {
    surface: {
      desk: '#EDE6D8',
      sheet: '#FBF8F1',
      raised: '#FFFDF8',
      sunken: '#F3EDE1',
      trough: '#E3DACA',
      hover: '#F1EADB',
      pressed: '#E4DAC6',
      selected: '#F4E3B5',
      scrim: 'rgba(20,29,48,0.46)',
    },
    ink: {
      strong: '#121C33',
      body: '#24304A',
      quiet: '#525B70',
      faint: '#6A7183',
      onSolid: '#FFFDF8',
      onSelected: '#24304A',
      disabled: '#9A9B9B',
    },
    rule: {
      hair: '#DED5C3',
      line: '#C4B9A3',
      control: '#857B68',
      strong: '#24304A',
    },
    focus: {
      ring: '#1F55B0',
      gap: '#FFFDF8',
    },
    accent: {
      solid: '#1B2947',
      solidHover: '#2A3B62',
      solidPressed: '#0F1930',
      text: '#1F4F9E',
      wash: '#E1E8F5',
    },
    danger: {
      text: '#9B1F2B',
      solid: '#9B1F2B',
      wash: '#F8E3DF',
      rule: '#B2434B',
    },
    warning: {
      text: '#7A4B00',
      solid: '#7A4B00',
      wash: '#F8E8C6',
      rule: '#9A6A14',
    },
    success: {
      text: '#35601F',
      solid: '#35601F',
      wash: '#E5EDD8',
      rule: '#57803E',
    },
    stamp: {
      draft: '#525B70',
      inReview: '#7A4B00',
      released: '#35601F',
      withdrawn: '#9B1F2B',
    },
    cell: {
      null: {
        fill: '#FBF8F1',
        mark: '#6A7183',
        markName: 'bare',
      },
      bpsk: {
        fill: '#D5D9F3',
        mark: '#1B1E4B',
        markName: 'dash',
      },
      pi2bpsk: {
        fill: '#E3D3EC',
        mark: '#1B1E4B',
        markName: 'slant',
      },
      qpsk: {
        fill: '#B4BAE8',
        mark: '#1B1E4B',
        markName: 'pips-1',
      },
      qam16: {
        fill: '#9299D8',
        mark: '#14163A',
        markName: 'pips-2',
      },
      qam64: {
        fill: '#6A71BE',
        mark: '#FFFFFF',
        markName: 'pips-3',
      },
      qam256: {
        fill: '#4A50A0',
        mark: '#FFFFFF',
        markName: 'pips-4',
      },
      qam1024: {
        fill: '#2F347A',
        mark: '#FFFFFF',
        markName: 'pips-5',
      },
      qam4096: {
        fill: '#14163A',
        mark: '#FFFFFF',
        markName: 'pips-6',
      },
      pilot: {
        fill: '#1E8371',
        mark: '#FFFFFF',
        markName: 'tooth',
      },
      tone: {
        fill: '#B85C1F',
        mark: '#FFFFFF',
        markName: 'ring',
      },
      reserved: {
        fill: '#EFE6D2',
        mark: '#6E6450',
        markName: 'hatch',
      },
    },
    canvas: {
      cellRule: '#DED5C3',
      symbolRule: '#C4B9A3',
      selectionDark: '#121C33',
      selectionLight: '#FFFDF8',
      hover: '#1F55B0',
      dcLine: '#857B68',
      ruleEdge: '#E3DACA',
      ruleTick: '#525B70',
    },
    wash: {
      prefix: '#F1D6BE',
      prefixEdge: '#9E4C14',
      arc: '#9E4C14',
    },
    plot: {
      background: '#FFFDF8',
      axis: '#525B70',
      grid: '#E8E0D0',
      trace: '#1B2947',
      traceFill: '#E4E6EC',
      traceI: '#1B2947',
      traceQ: '#1E7767',
      reference: '#6A7183',
      before: '#786E45',
      limit: '#9B1F2B',
      notch: '#1F4F9E',
      cursor: '#1F55B0',
      point: '#3F459A',
      peak: '#9B1F2B',
    },
  },
  night: {
    surface: {
      desk: '#0D1830',
      sheet: '#15233F',
      raised: '#1B2B4B',
      sunken: '#111D37',
      trough: '#0A1327',
      hover: '#213354',
      pressed: '#2A3E63',
      selected: '#4A4328',
      scrim: 'rgba(4,8,18,0.62)',
    },
    ink: {
      strong: '#F6F0E2',
      body: '#E0DBCF',
      quiet: '#B3B8C4',
      faint: '#98A1B4',
      onSolid: '#101A30',
      onSelected: '#F6F0E2',
      disabled: '#69748C',
    },
    rule: {
      hair: '#263656',
      line: '#35476B',
      control: '#8794B2',
      strong: '#E0DBCF',
    },
    focus: {
      ring: '#9CC2FF',
      gap: '#0D1830',
    },
    accent: {
      solid: '#EFE7D4',
      solidHover: '#FFF8E8',
      solidPressed: '#D6CDB8',
      text: '#A9C8FA',
      wash: '#22365E',
    },
    danger: {
      text: '#F3A6A2',
      solid: '#F3A6A2',
      wash: '#43222F',
      rule: '#D87C7A',
    },
    warning: {
      text: '#EBC46F',
      solid: '#EBC46F',
      wash: '#3E3422',
      rule: '#C9A24D',
    },
    success: {
      text: '#AED08E',
      solid: '#AED08E',
      wash: '#25382F',
      rule: '#86AC68',
    },
    stamp: {
      draft: '#B3B8C4',
      inReview: '#EBC46F',
      released: '#AED08E',
      withdrawn: '#F3A6A2',
    },
    cell: {
      null: {
        fill: '#15233F',
        mark: '#98A1B4',
        markName: 'bare',
      },
      bpsk: {
        fill: '#37427A',
        mark: '#FFFFFF',
        markName: 'dash',
      },
      pi2bpsk: {
        fill: '#563F78',
        mark: '#FFFFFF',
        markName: 'slant',
      },
      qpsk: {
        fill: '#4F5BA3',
        mark: '#FFFFFF',
        markName: 'pips-1',
      },
      qam16: {
        fill: '#6974C4',
        mark: '#FFFFFF',
        markName: 'pips-2',
      },
      qam64: {
        fill: '#8993DD',
        mark: '#0B1024',
        markName: 'pips-3',
      },
      qam256: {
        fill: '#A9B1EC',
        mark: '#0B1024',
        markName: 'pips-4',
      },
      qam1024: {
        fill: '#CCD1F6',
        mark: '#0B1024',
        markName: 'pips-5',
      },
      qam4096: {
        fill: '#F3F3FE',
        mark: '#0B1024',
        markName: 'pips-6',
      },
      pilot: {
        fill: '#55BCA6',
        mark: '#08221D',
        markName: 'tooth',
      },
      tone: {
        fill: '#E39558',
        mark: '#2A1404',
        markName: 'ring',
      },
      reserved: {
        fill: '#24334F',
        mark: '#A9AEB6',
        markName: 'hatch',
      },
    },
    canvas: {
      cellRule: '#263656',
      symbolRule: '#35476B',
      selectionDark: '#0A1327',
      selectionLight: '#F6F0E2',
      hover: '#9CC2FF',
      dcLine: '#7C8AA8',
      ruleEdge: '#0A1327',
      ruleTick: '#B3B8C4',
    },
    wash: {
      prefix: '#4F3A33',
      prefixEdge: '#E39558',
      arc: '#E39558',
    },
    plot: {
      background: '#15233F',
      axis: '#B3B8C4',
      grid: '#24345A',
      trace: '#EFE7D4',
      traceFill: '#25355A',
      traceI: '#EFE7D4',
      traceQ: '#6CC7B3',
      reference: '#98A1B4',
      before: '#B4A878',
      limit: '#F3A6A2',
      notch: '#A9C8FA',
      cursor: '#9CC2FF',
      point: '#A9B1EC',
      peak: '#F3A6A2',
    },
  },
} as const;

export const space = {
  '0': 0,
  '1': 4,
  '2': 8,
  '3': 12,
  '4': 16,
  '5': 20,
  '6': 24,
  '8': 32,
  '10': 40,
  '12': 48,
  '16': 64,
} as const;

export const radius = {
  none: 0,
  cell: 0,
  control: 3,
  card: 4,
  sheet: 6,
  stamp: 2,
  round: 999,
} as const;

export const border = {
  hair: 1,
  line: 1,
  strong: 1.5,
  focus: 2,
  focusOffset: 2,
} as const;

export const type = {
  display: {
    family: 'text',
    size: 28,
    line: 34,
    weight: 600,
    tracking: -0.3,
  },
  title: {
    family: 'text',
    size: 20,
    line: 26,
    weight: 600,
    tracking: -0.1,
  },
  heading: {
    family: 'text',
    size: 16,
    line: 22,
    weight: 600,
    tracking: 0,
  },
  body: {
    family: 'text',
    size: 15,
    line: 22,
    weight: 400,
    tracking: 0,
  },
  bodyStrong: {
    family: 'text',
    size: 15,
    line: 22,
    weight: 600,
    tracking: 0,
  },
  small: {
    family: 'text',
    size: 13,
    line: 18,
    weight: 400,
    tracking: 0,
  },
  label: {
    family: 'text',
    size: 12,
    line: 16,
    weight: 500,
    tracking: 0.1,
  },
  axis: {
    family: 'figure',
    size: 11,
    line: 14,
    weight: 400,
    tracking: 0,
  },
  figureSmall: {
    family: 'figure',
    size: 13,
    line: 18,
    weight: 400,
    tracking: 0,
  },
  figure: {
    family: 'figure',
    size: 15,
    line: 20,
    weight: 500,
    tracking: -0.1,
  },
  figureLarge: {
    family: 'figure',
    size: 22,
    line: 28,
    weight: 500,
    tracking: -0.4,
  },
  figureHero: {
    family: 'figure',
    size: 34,
    line: 40,
    weight: 500,
    tracking: -0.8,
  },
  stamp: {
    family: 'text',
    size: 12,
    line: 16,
    weight: 700,
    tracking: 0.6,
  },
} as const;

export const motion = {
  none: 0,
  quick: 90,
  usual: 140,
  slow: 190,
  easing: 'cubic-bezier(0.2, 0, 0, 1)',
} as const;

export const breakpoint = {
  phone: 0,
  tablet: 720,
  wide: 1120,
  large: 1680,
} as const;

export const target = {
  touchMin: 44,
  pointerMin: 28,
  rowTouch: 52,
  rowPointer: 36,
} as const;

export const z = {
  page: 0,
  stickyHead: 10,
  trough: 20,
  navigation: 30,
  menu: 40,
  scrim: 50,
  sheet: 60,
  dialog: 70,
  toast: 80,
  tooltip: 90,
} as const;

export const cellMarks = {
  minCellPx: 10,
  maxMarkPx: 14,
  pipPx: 2,
} as const;

export const cellReduction = {
  toothPx: 2,
  toothMinPitchPx: 6,
  mixMinPitchPx: 3,
  priority: ['tone', 'pilot', 'reserved', 'data', 'null'],
} as const;

export const elevation = {
  flat: {
    rule: 'hair',
    shadow: 'none',
  },
  sheet: {
    rule: 'line',
    shadow: {
      paper: '0 1px 0 rgba(60,44,18,0.10)',
      night: '0 1px 0 rgba(0,0,0,0.35)',
    },
  },
  lifted: {
    rule: 'line',
    shadow: {
      paper: '0 1px 0 rgba(60,44,18,0.12), 0 6px 14px -6px rgba(60,44,18,0.22)',
      night: '0 1px 0 rgba(0,0,0,0.45), 0 8px 18px -6px rgba(0,0,0,0.55)',
    },
  },
  over: {
    rule: 'strong',
    shadow: {
      paper: '0 2px 0 rgba(60,44,18,0.10), 0 18px 36px -12px rgba(30,24,12,0.34)',
      night: '0 2px 0 rgba(0,0,0,0.45), 0 20px 40px -12px rgba(0,0,0,0.70)',
    },
  },
} as const;
