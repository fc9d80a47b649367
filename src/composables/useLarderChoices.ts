import type { LarderChoice } from '@/components/batches/recipe-draft'
import { api } from '@/api'
import { useRequest } from './useRequest.ts'

/** Every ingredient a recipe can take, by name. */
export const useLarderChoices = () =>
  useRequest(
    async (signal): Promise<LarderChoice[]> => {
      const choices: LarderChoice[] = []
      let cursor: string | null = null
      do {
        const page = await api.larder.ingredients(
          { query: { limit: 200, ...(cursor && { cursor }) } },
          { signal },
        )
        choices.push(...page.items.filter(({ kind }) => kind !== 'cleaning'))
        cursor = page.nextCursor
      } while (cursor)
      return choices
    },
    { isEmpty: () => false },
  )
