import { definePreset } from '@primeuix/themes'

const ring = {
  width: '3px',
  style: 'solid',
  color: 'var(--ink)',
  offset: '2px',
  shadow: '0 0 0 2px var(--snow)',
}
const insideRing = { ...ring, offset: '-3px', shadow: 'none' }
const edge = 'var(--edge)'
const row = '13px 12px 13px 0'

/**
 * The library's components in our colours, from nothing: no ready-made theme lies under it. Every value is one of
 * our own variables, so that another colour set reaches the library without a second preset. Only the components
 * that our Base components are built on have a part here.
 */
export const notchwisePreset = definePreset({
  primitive: { borderRadius: { none: '0', sm: '4px', md: '4px' } },
  semantic: {
    transitionDuration: '0s',
    disabledOpacity: '1',
    iconSize: '1.25rem',
    anchorGutter: '2px',
    focusRing: ring,
    mask: {
      transitionDuration: '0s',
      background: 'color-mix(in srgb, var(--ink) 55%, transparent)',
      color: 'var(--paper)',
    },
    primary: { color: 'var(--spruce)', contrastColor: 'var(--on-spruce)' },
    text: {
      color: 'var(--ink)',
      mutedColor: 'var(--ink-soft)',
      hoverColor: 'var(--ink)',
      hoverMutedColor: 'var(--ink)',
    },
    content: {
      background: 'var(--snow)',
      borderColor: 'var(--line)',
      color: 'var(--ink)',
      hoverBackground: 'var(--ice)',
      hoverColor: 'var(--ink)',
      borderRadius: 'var(--radius)',
    },
    highlight: { background: 'var(--spruce-wash)', color: 'var(--ink)' },
    navigation: { item: { padding: '10px 14px' } },
  },
  components: {
    dialog: {
      root: {
        background: 'var(--snow)',
        borderColor: 'var(--ink)',
        color: 'var(--ink)',
        borderRadius: 'var(--radius)',
        shadow: 'none',
      },
      header: { padding: '20px 24px 8px', gap: '16px' },
      title: { fontSize: 'var(--text-4)', fontWeight: '900' },
      content: { padding: '0 24px 20px' },
      footer: { padding: '0 24px 24px', gap: '12px' },
    },
    select: {
      root: {
        background: 'var(--snow)',
        disabledBackground: 'var(--ice)',
        filledBackground: 'var(--snow)',
        filledHoverBackground: 'var(--snow)',
        filledFocusBackground: 'var(--snow)',
        borderColor: edge,
        hoverBorderColor: 'var(--ink)',
        focusBorderColor: 'var(--ink)',
        invalidBorderColor: 'var(--madder)',
        color: 'var(--ink)',
        disabledColor: 'var(--ink-soft)',
        placeholderColor: 'var(--ink-soft)',
        invalidPlaceholderColor: 'var(--madder)',
        shadow: 'none',
        paddingX: '14px',
        paddingY: '9px',
        borderRadius: 'var(--radius)',
        focusRing: ring,
        transitionDuration: '0s',
      },
      dropdown: { width: '40px', color: 'var(--ink)' },
      overlay: {
        background: 'var(--snow)',
        borderColor: 'var(--ink)',
        borderRadius: 'var(--radius)',
        color: 'var(--ink)',
        shadow: 'none',
      },
      list: { padding: '4px', gap: '0', header: { padding: '8px' } },
      option: {
        focusBackground: 'var(--ice)',
        selectedBackground: 'var(--spruce-wash)',
        selectedFocusBackground: 'var(--spruce-wash)',
        color: 'var(--ink)',
        focusColor: 'var(--ink)',
        selectedColor: 'var(--ink)',
        selectedFocusColor: 'var(--ink)',
        padding: '10px 12px',
        borderRadius: 'var(--radius)',
      },
      checkmark: { color: 'var(--spruce)', gutterStart: '0', gutterEnd: '8px' },
      emptyMessage: { padding: '10px 12px' },
    },
    datatable: {
      root: { transitionDuration: '0s', borderColor: 'var(--line)' },
      headerCell: {
        background: 'transparent',
        hoverBackground: 'transparent',
        selectedBackground: 'transparent',
        borderColor: 'var(--ink)',
        color: 'var(--ink-soft)',
        hoverColor: 'var(--ink)',
        selectedColor: 'var(--ink)',
        gap: '6px',
        padding: row,
        focusRing: insideRing,
      },
      columnTitle: { fontWeight: '400' },
      row: {
        background: 'transparent',
        hoverBackground: 'var(--snow)',
        selectedBackground: 'var(--spruce-wash)',
        color: 'var(--ink)',
        hoverColor: 'var(--ink)',
        selectedColor: 'var(--ink)',
        stripedBackground: 'transparent',
        focusRing: insideRing,
      },
      bodyCell: { borderColor: 'var(--line)', padding: row, selectedBorderColor: 'var(--line)' },
      sortIcon: { color: 'var(--ink)', hoverColor: 'var(--ink)', size: '14px' },
      loadingIcon: { size: '24px' },
    },
  },
})
