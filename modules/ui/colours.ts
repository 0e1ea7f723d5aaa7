/** Colours of the three themes; contrast of every pair is recomputed in a test. */

export type StatusColours = { text: string; bg: string; edge: string }

const light = {
  yard: '#F4F3EE',
  sheet: '#FFFFFF',
  well: '#E9E8E1',
  hairline: '#D3D1C7',
  edge: '#6B746F',
  ink: '#16211F',
  inkSoft: '#414C48',
  inkFaint: '#5A6460',
  act: '#0B5B57',
  actPressed: '#074743',
  onAct: '#FFFFFF',
  actWash: '#DCEBE8',
  link: '#0A5450',
  focus: '#1D3FBF',
  fluid: '#A35303',
  fluidDeep: '#6E3A06',
  fluidWash: '#F6E6D3',
  headroom: '#5C7A8C',
  settled: {
    text: '#1E5631',
    bg: '#DFF0E1',
    edge: '#2F7A48',
  },
  check: {
    text: '#704000',
    bg: '#FBE7C6',
    edge: '#A3650A',
  },
  stop: {
    text: '#8A1A15',
    bg: '#FADEDA',
    edge: '#B3312A',
  },
  waiting: {
    text: '#2D4373',
    bg: '#DFE6F5',
    edge: '#4E68A6',
  },
  voided: {
    text: '#45494E',
    bg: '#E4E5E6',
    edge: '#6D7277',
  },
  note: {
    text: '#0F4A6C',
    bg: '#DAECF6',
    edge: '#2A769F',
  },
}

const dark = {
  yard: '#111A18',
  sheet: '#1B2523',
  well: '#0B1211',
  hairline: '#34403D',
  edge: '#84918C',
  ink: '#EEF2EF',
  inkSoft: '#BCC7C2',
  inkFaint: '#98A5A0',
  act: '#7CCFC4',
  actPressed: '#A4E2DA',
  onAct: '#06201D',
  actWash: '#17332F',
  link: '#8FD8CE',
  focus: '#A9BEFF',
  fluid: '#CD8A51',
  fluidDeep: '#E5B187',
  fluidWash: '#3A2A1B',
  headroom: '#7F9DAF',
  settled: {
    text: '#A8DDB5',
    bg: '#17331F',
    edge: '#5FA875',
  },
  check: {
    text: '#F2CD8C',
    bg: '#3A2A0C',
    edge: '#C79238',
  },
  stop: {
    text: '#F6B8B1',
    bg: '#411714',
    edge: '#DB7A71',
  },
  waiting: {
    text: '#BECDF2',
    bg: '#1C2946',
    edge: '#7F97D3',
  },
  voided: {
    text: '#C6CACD',
    bg: '#2B3033',
    edge: '#8C9397',
  },
  note: {
    text: '#A9D6EF',
    bg: '#0F2D3F',
    edge: '#5AA3C9',
  },
}

const glare = {
  yard: '#FFFFFF',
  sheet: '#FFFFFF',
  well: '#F2F2F2',
  hairline: '#8A8A8A',
  edge: '#1A1A1A',
  ink: '#000000',
  inkSoft: '#1C1C1C',
  inkFaint: '#333333',
  act: '#003B38',
  actPressed: '#002624',
  onAct: '#FFFFFF',
  actWash: '#E3F0EE',
  link: '#003B38',
  focus: '#001F9C',
  fluid: '#7A3B00',
  fluidDeep: '#4D2500',
  fluidWash: '#FBEBDA',
  headroom: '#35525F',
  settled: {
    text: '#0B3A1B',
    bg: '#FFFFFF',
    edge: '#0B3A1B',
  },
  check: {
    text: '#4A2900',
    bg: '#FFFFFF',
    edge: '#4A2900',
  },
  stop: {
    text: '#6B0500',
    bg: '#FFFFFF',
    edge: '#6B0500',
  },
  waiting: {
    text: '#14275A',
    bg: '#FFFFFF',
    edge: '#14275A',
  },
  voided: {
    text: '#2B2B2B',
    bg: '#FFFFFF',
    edge: '#2B2B2B',
  },
  note: {
    text: '#00324D',
    bg: '#FFFFFF',
    edge: '#00324D',
  },
}

export const themes = { light, dark, glare }

export type ThemeName = keyof typeof themes
export type Colours = typeof light
