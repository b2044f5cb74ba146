/** Items by key, keys in order of first appearance. (Map.groupBy came with Node 21.) */
export function groupBy<T, K>(items: readonly T[], key: (item: T) => K): Map<K, T[]> {
  const groups = new Map<K, T[]>()
  for (const item of items) {
    const one = key(item)
    const group = groups.get(one)
    if (group) group.push(item)
    else groups.set(one, [item])
  }
  return groups
}
