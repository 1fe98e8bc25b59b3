import { ref, watch } from 'vue'
import { ApiProblem } from '../../api/request.ts'
import { heldToken } from '../../router/heldToken.ts'

/** The token the page was opened with, until it is used or refused. */
export function useMailToken() {
  const isLinkGood = ref(true)
  watch(heldToken, () => (isLinkGood.value = true))

  /** Uses the token; what is refused for the link's own sake is refused for good. */
  async function spend<Answer>(use: (token: string) => Promise<Answer>): Promise<Answer> {
    try {
      const answer = await use(heldToken.value ?? '')
      heldToken.value = null
      return answer
    } catch (error) {
      if (error instanceof ApiProblem && error.code === 'link-not-good') isLinkGood.value = false
      throw error
    }
  }

  return { token: heldToken, isLinkGood, spend }
}
