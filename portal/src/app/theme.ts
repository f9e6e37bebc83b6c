import { Button, createTheme, Input, type MantineColorsTuple } from '@mantine/core';

const tuple = (color: string) => Array.from({ length: 10 }, () => color) as unknown as MantineColorsTuple;

/** Mantine in our palette; the colors themselves are CSS variables in tokens.css, so that light and dark share one theme. */
export const theme = createTheme({
  fontFamily: "Inter, 'Helvetica Neue', Arial, sans-serif",
  headings: { fontFamily: 'Lora, Georgia, serif', fontWeight: '600' },
  colors: { ink: tuple('var(--ink)'), oxide: tuple('var(--oxide)') },
  primaryColor: 'ink',
  defaultRadius: 'sm',
  radius: { sm: 'var(--radius)' },
  cursorType: 'pointer',
  respectReducedMotion: true,
  components: {
    Button: Button.extend({ defaultProps: { size: 'md', autoContrast: false }, styles: { root: { minHeight: 44, fontWeight: 600, paddingInline: 18 } } }),
    Input: Input.extend({ defaultProps: { size: 'md' }, styles: { input: { minHeight: 44, backgroundColor: 'var(--sheet)', color: 'var(--graphite)' } } }),
  },
});
