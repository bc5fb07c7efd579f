/** Names the tokens of app/assets/css/main.css for Tailwind; no colour is written here. */
import type { Config } from 'tailwindcss'

const token = (name: string) => `var(--${name})`

export default {
  content: [],
  darkMode: ['selector', '[data-theme="dark"]'],
  theme: {
    colors: {
      'transparent': 'transparent', 'current': 'currentColor',
      'paper': token('paper'), 'card': token('card'), 'shoal': token('shoal'), 'buff': token('buff'),
      'ink': token('ink'), 'ink-2': token('ink-2'), 'rule': token('rule'), 'hair': token('hair'),
      'magenta': token('magenta'), 'on-magenta': token('on-magenta'),
      'good': token('good'), 'caution': token('caution'), 'error': token('error'),
      'blue': token('blue'), 'vermillion': token('vermillion'), 'green': token('green'), 'purple': token('purple'),
      'depth-1': token('depth-1'), 'depth-2': token('depth-2'), 'depth-3': token('depth-3'),
      'depth-4': token('depth-4'), 'depth-5': token('depth-5'), 'depth-6': token('depth-6'),
    },
    fontFamily: { sans: ['"Source Sans 3"', '"Noto Sans"', '"DejaVu Sans"', 'sans-serif'] },
    fontSize: {
      caption: ['12.5px', '18px'], table: ['14px', '20px'], body: ['15px', '22px'],
      h3: ['17px', '24px'], h2: ['21px', '28px'], h1: ['28px', '34px'],
    },
    borderRadius: { none: '0', DEFAULT: '3px' },
    boxShadow: { none: 'none' },
  },
} satisfies Config
