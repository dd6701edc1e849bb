/** Freezes plain data in depth and returns it. What is frozen already is taken to be frozen in depth, so that the cost is that of the changes. */
export function deepFreeze<T>(value: T): T {
  if (typeof value !== 'object' || value === null || Object.isFrozen(value)) return value
  Object.freeze(value)
  for (const each of Object.values(value)) deepFreeze(each)
  return value
}
