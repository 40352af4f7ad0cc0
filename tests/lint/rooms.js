/** Files that may not import what matches these expressions, each with the reason; `import()` neither. */
export function room(files, forbidden, ignores = []) {
  const patterns = Object.entries(forbidden).map(([regex, message]) => ({ regex, message }))
  const lazy = Object.entries(forbidden).map(([regex, message]) => ({
    selector: `ImportExpression[source.value=/${regex.replaceAll('/', '\\/')}/]`,
    message,
  }))
  return {
    files,
    ignores,
    rules: {
      '@typescript-eslint/no-restricted-imports': ['error', { patterns }],
      'no-restricted-syntax': ['error', ...lazy],
    },
  }
}

/** Forbids properties: `[object or null, property, reason]`. */
export function without(...properties) {
  return {
    'no-restricted-properties': [
      'error',
      ...properties.map(([object, property, message]) => ({ ...(object && { object }), property, message })),
    ],
  }
}

/** The same answer everywhere and always: no clock, no chance, no machine. */
export function purity(files) {
  const clock = 'the clock is an argument'
  const machine = [
    ...[
      'process',
      'window',
      'document',
      'navigator',
      'location',
      'localStorage',
      'sessionStorage',
      'globalThis',
    ],
    ...[
      'fetch',
      'WebSocket',
      'setTimeout',
      'setInterval',
      'queueMicrotask',
      'performance',
      'crypto',
      'console',
    ],
  ]
  return {
    files,
    rules: {
      'no-restricted-globals': ['error', ...machine],
      ...without(['Date', 'now', clock], ['Math', 'random', 'chance is an argument']),
      'no-restricted-syntax': [
        'error',
        { selector: "NewExpression[callee.name='Date'][arguments.length=0]", message: clock },
        { selector: "CallExpression[callee.name='Date']", message: clock },
        { selector: 'ImportExpression', message: 'shared imports zod and itself only' },
      ],
    },
  }
}
