/**
 * The design tokens of Headwater, each written once as [light, dark]. They become CSS variables
 * (`--ink`, `--fraction-3`), so that a theme change repaints without a reload and charts can use them.
 */
export const tokens = {
  paper: ['#FAF8F3', '#12191C'],
  surface: ['#FFFFFF', '#182226'],
  sunk: ['#F1EDE4', '#0D1315'],
  ink: ['#1E2A2F', '#E8E4DA'],
  'ink-2': ['#5A676D', '#9DAAAE'],
  rule: ['#DDD6C8', '#2C393E'],
  // The edge of a control: at least 3 : 1 on paper and surface, where a rule would be too pale.
  edge: ['#8B8578', '#6F7F85'],
  accent: ['#0F6B74', '#62BCC3'],
  'accent-strong': ['#0A545C', '#8AD0D6'],
  'accent-wash': ['#E1EFEF', '#163236'],
  'on-accent': ['#FFFFFF', '#12191C'],
  inside: ['#3F6B35', '#9CC98D'],
  'inside-wash': ['#EAF2E4', '#1B2C18'],
  watch: ['#8F5D00', '#E3B15A'],
  'watch-wash': ['#FBF1DC', '#33290F'],
  outside: ['#A63A2B', '#EB8D80'],
  'outside-wash': ['#FBE9E5', '#371B17'],
  // The stream of the stage ladder: water seen through paper.
  stream: ['#D3E0DD', '#1F3438'],
  'fraction-1': ['#1F7680', '#3C98A2'],
  'fraction-2': ['#E9B04A', '#EDBE68'],
  'fraction-3': ['#3E2A66', '#7552A0'],
  'fraction-4': ['#9CCBE0', '#A9D3E0'],
  'fraction-5': ['#B9603C', '#CF7E5B'],
  'fraction-6': ['#D9DDA8', '#DDE2B4']
} as const satisfies Record<string, readonly [light: string, dark: string]>;
