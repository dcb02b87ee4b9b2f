import type { Config } from 'tailwindcss';

/** The palette of the house. Its values, by day and by night, stand as variables in app/globals.css. */
const colours = ['linen', 'sheet', 'ink', 'soft', 'line', 'tick', 'signal'];

const config: Config = {
  content: ['./app/**/*.{ts,tsx}', './components/**/*.{ts,tsx}'],
  theme: {
    extend: {
      colors: Object.fromEntries(colours.map((name) => [name, `var(--${name})`])),
      fontFamily: {
        sans: ['"Atkinson Hyperlegible Next Variable"', 'sans-serif'],
        mono: ['"Atkinson Hyperlegible Mono Variable"', 'monospace'],
        name: ['"Archivo Variable"', 'sans-serif'],
      },
      // Fingers in gloves at the rig, and elsewhere.
      spacing: { rig: '64px', touch: '44px' },
      minHeight: { rig: '64px', touch: '44px' },
      minWidth: { rig: '64px', touch: '44px' },
    },
  },
};

export default config;
