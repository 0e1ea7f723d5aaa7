import type { CSSProperties, ReactNode } from 'react'
import { fonts } from './measures'
import { useColours } from './theme'

export type Column = {
  key: string
  label: ReactNode
  /** Figures stand at the right in digits of one width. */
  isFigure?: boolean
  sort?: 'ascending' | 'descending' | 'none'
}

export type TableRow = {
  key: string
  /** The first cell names the row. */
  cells: ReactNode[]
  /** A line over everything, heavier words. */
  isTotal?: boolean
}

/**
 * A real table: caption, scopes, figures at the right. It scrolls sideways in its own named region, which the
 * keyboard reaches; the head, the first column and the totals stay in sight.
 */
export function Table({
  caption,
  columns,
  rows,
  isCaptionHidden = false,
  density = 'desk',
}: {
  caption: string
  columns: readonly Column[]
  rows: readonly TableRow[]
  isCaptionHidden?: boolean
  density?: 'desk' | 'roomy'
}) {
  const colours = useColours()
  const cell: CSSProperties = {
    padding: density === 'desk' ? '6px 10px' : '12px 10px',
    height: 28,
    textAlign: 'left',
    verticalAlign: 'middle',
    borderBottom: `1px solid ${colours.hairline}`,
    color: colours.ink,
    backgroundColor: colours.sheet,
    fontWeight: 400,
  }
  const figure: CSSProperties = {
    textAlign: 'right',
    fontVariantNumeric: 'tabular-nums',
    whiteSpace: 'nowrap',
  }
  const first: CSSProperties = {
    position: 'sticky',
    left: 0,
    zIndex: 1,
    borderRight: `1px solid ${colours.hairline}`,
  }
  return (
    <div
      role="region"
      aria-label={caption}
      tabIndex={0}
      style={{
        overflowX: 'auto',
        // Inside a column of a fixed height it would otherwise shrink to its first row.
        flexShrink: 0,
        maxWidth: '100%',
        border: `1px solid ${colours.hairline}`,
        borderRadius: 6,
      }}
    >
      <table
        style={{
          borderCollapse: 'separate',
          borderSpacing: 0,
          width: '100%',
          fontFamily: fonts.text,
          fontSize: 16,
        }}
      >
        <caption
          style={
            isCaptionHidden
              ? {
                  position: 'absolute',
                  width: 1,
                  height: 1,
                  overflow: 'hidden',
                  clipPath: 'inset(50%)',
                }
              : { textAlign: 'left', padding: '8px 10px', color: colours.inkSoft, fontSize: 15 }
          }
        >
          {caption}
        </caption>
        <thead>
          <tr>
            {columns.map((column, index) => (
              <th
                key={column.key}
                scope="col"
                aria-sort={
                  column.sort === undefined || column.sort === 'none' ? undefined : column.sort
                }
                style={{
                  ...cell,
                  ...(column.isFigure ? figure : {}),
                  ...(index === 0 ? { ...first, zIndex: 3 } : {}),
                  position: 'sticky',
                  top: 0,
                  backgroundColor: colours.well,
                  color: colours.ink,
                  fontWeight: 700,
                  borderBottom: `2px solid ${colours.edge}`,
                }}
              >
                {column.label}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr key={row.key}>
              {row.cells.map((content, index) => {
                const style: CSSProperties = {
                  ...cell,
                  ...(columns[index]?.isFigure ? figure : {}),
                  ...(index === 0 ? { ...first, fontWeight: 600 } : {}),
                  ...(row.isTotal
                    ? {
                        fontWeight: 700,
                        borderTop: `2px solid ${colours.edge}`,
                        backgroundColor: colours.well,
                      }
                    : {}),
                }
                return index === 0 ? (
                  <th key={columns[index]?.key ?? index} scope="row" style={style}>
                    {content}
                  </th>
                ) : (
                  <td key={columns[index]?.key ?? index} style={style}>
                    {content}
                  </td>
                )
              })}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  )
}

/** A figure that opens: a button as quiet as a number, with its whole meaning as its name. */
export function FigureButton({
  shown,
  label,
  onPress,
}: {
  shown: string
  label: string
  onPress: () => void
}) {
  const colours = useColours()
  return (
    <button
      type="button"
      aria-label={label}
      onClick={onPress}
      style={{
        font: 'inherit',
        fontVariantNumeric: 'tabular-nums',
        color: colours.link,
        textDecoration: 'underline',
        textUnderlineOffset: 3,
        background: 'none',
        border: 0,
        minHeight: 28,
        minWidth: 28,
        padding: '2px 4px',
        cursor: 'pointer',
      }}
    >
      {shown}
    </button>
  )
}
