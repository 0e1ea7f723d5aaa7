import { useWindowDimensions } from 'react-native'

/** phone < 600 <= tablet < 840 <= desk < 1200 <= wide */
export type WindowClass = 'phone' | 'tablet' | 'desk' | 'wide'

export function windowClassOf(width: number): WindowClass {
  if (width < 600) return 'phone'
  if (width < 840) return 'tablet'
  return width < 1200 ? 'desk' : 'wide'
}

export function useWindowClass(): WindowClass {
  return windowClassOf(useWindowDimensions().width)
}

/** Height of the usual target: gloves on a phone or tablet, a mouse at a desk. */
export function useTargetHeight(): number {
  const windowClass = useWindowClass()
  return windowClass === 'phone' || windowClass === 'tablet' ? 56 : 44
}
