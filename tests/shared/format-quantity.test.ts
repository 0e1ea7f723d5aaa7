import {
  formatFigure,
  formatLitresAs,
  formatQuantity,
  formatTyped,
} from '@/shared/quantities/format'

test('figures are rounded once, grouped and signed as the place writes them', () => {
  expect(formatQuantity('18.449', 'gal_us')).toBe('18.4\u00a0gal')
  expect(formatQuantity('1850', 'L')).toBe('1,850.0\u00a0L')
  expect(formatQuantity('-3.14', 'gal_us')).toBe('\u22123.1\u00a0gal')
  expect(formatQuantity('0', 'kg')).toBe('0\u00a0kg')
  expect(formatFigure('1234567.85', 1, 'de-DE')).toBe('1.234.567,8')
  expect(formatFigure('-0.04', 1)).toBe('0.0')
})

test('what was typed is shown as it was typed', () => {
  expect(formatTyped('18.50', 'gal_us')).toBe('18.50\u00a0gal')
})

// Invented company's table: 6,868.5 L in all; 6868.5 / 3.785411784 = 1814.46...
test('litres are shown in gallons', () => {
  expect(formatLitresAs('6868.5', 'gal_us')).toBe('1,814.5\u00a0gal')
})
