import { computed } from 'vue'
import { useRoute, useRouter, type LocationQuery } from 'vue-router'
import type { TableSort } from '../components/base/lists/table'

const one = (value: LocationQuery[string] | undefined) => (Array.isArray(value) ? value[0] : value) ?? ''

/**
 * Search, filters, sort and page of a list, kept in the address: a reload, the back key and a link to a colleague
 * show the same list. A changed search or filter begins at the first page.
 */
export function useListAddress<Filter extends string>(filters: readonly Filter[]) {
  const route = useRoute()
  const router = useRouter()

  function go(changes: Record<string, string>) {
    const query = { ...route.query, ...changes }
    const kept = Object.fromEntries(Object.entries(query).filter(([, value]) => value !== ''))
    void router.replace({ query: kept })
  }

  const search = computed({
    get: () => one(route.query.search),
    set: (text) => go({ search: text, page: '' }),
  })
  const page = computed({
    get: () => Math.max(1, Number(one(route.query.page)) || 1),
    set: (number) => go({ page: number > 1 ? String(number) : '' }),
  })
  const sort = computed<TableSort | null>({
    get: () => {
      const key = one(route.query.sort)
      return key ? { key, descending: one(route.query.descending) === 'true' } : null
    },
    set: (sorted) => go({ sort: sorted?.key ?? '', descending: sorted?.descending ? 'true' : '', page: '' }),
  })
  const filter = (name: Filter) => one(route.query[name]) || null
  const setFilter = (name: Filter, value: string | null) => go({ [name]: value ?? '', page: '' })
  const filtered = computed(() => search.value !== '' || filters.some((name) => filter(name) !== null))
  const clear = () =>
    go({ search: '', page: '', ...Object.fromEntries(filters.map((name): [string, string] => [name, ''])) })

  /** As the server is asked. */
  const query = computed(() => ({
    search: search.value,
    sort: sort.value?.key,
    descending: sort.value?.descending ? 'true' : '',
    page: page.value,
    ...Object.fromEntries(filters.map((name) => [name, filter(name)])),
  }))

  return { search, page, sort, filter, setFilter, filtered, clear, query }
}
