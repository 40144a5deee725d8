import type { Config } from 'tailwindcss';

/** The tokens' names; their values, in both themes, are in app/look.css. The default palette is left out on purpose. */
export default {
  theme: {
    colors: {
      transparent: 'transparent',
      current: 'currentColor',
      surround: 'var(--surround)',
      panel: 'var(--panel)',
      sheet: 'var(--sheet)',
      well: 'var(--well)',
      ink: { DEFAULT: 'var(--ink)', 2: 'var(--ink-2)', 3: 'var(--ink-3)' },
      edge: 'var(--edge)',
      line: { DEFAULT: 'var(--line)', 2: 'var(--line-2)' },
      light: {
        DEFAULT: 'var(--light)',
        ink: 'var(--light-ink)',
        soft: 'var(--light-soft)',
        on: 'var(--on-light)',
      },
      channel: { red: 'var(--red)', green: 'var(--green)', blue: 'var(--blue)' },
    },
    fontFamily: {
      sans: ['var(--sans)'],
      mono: ['var(--mono)'],
    },
    extend: {
      borderRadius: { panel: '14px', well: '10px' },
      maxWidth: { report: '1080px', text: '62ch' },
    },
  },
} satisfies Config;
