import type { Config } from 'tailwindcss';

/** Names for the tokens that app/globals.css sets for day and night. Colour belongs to the wire: there are few others. */
export default {
  content: ['./app/**/*.{ts,tsx}', './components/**/*.{ts,tsx}'],
  theme: {
    extend: {
      colors: {
        linen: 'var(--linen)',
        sheet: 'var(--sheet)',
        ink: 'var(--ink)',
        soft: 'var(--soft)',
        line: 'var(--line)',
        tick: 'var(--tick)',
        signal: 'var(--signal)',
      },
      fontFamily: {
        display: ["'Archivo Variable'", 'sans-serif'],
        reading: ["'Atkinson Hyperlegible Next Variable'", 'sans-serif'],
        code: ["'Atkinson Hyperlegible Mono Variable'", 'monospace'],
      },
    },
  },
} satisfies Config;
