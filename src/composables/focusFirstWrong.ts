import { nextTick } from 'vue';

const WRONG = '[aria-invalid="true"]';
const TYPED_INTO = 'input, select, textarea, button';

/**
 * Once the errors of a refused form are painted: brings the person to the first field that carries one,
 * opening what it is folded under.
 *
 * @param roots  elements that hold the fields, in any order
 */
export async function focusFirstWrong(roots: Iterable<Element>): Promise<void> {
  await nextTick();
  const wrong = [...roots].flatMap((root) => [...(root.matches(WRONG) ? [root] : []), ...root.querySelectorAll(WRONG)]);
  const [first] = wrong.sort((a, b) => (a.compareDocumentPosition(b) & Node.DOCUMENT_POSITION_FOLLOWING ? -1 : 1));
  const field = first?.matches(TYPED_INTO) ? first : first?.querySelector(TYPED_INTO);
  for (let fold = field?.closest('details'); fold; fold = fold.parentElement?.closest('details')) fold.open = true;
  (field as HTMLElement | null | undefined)?.focus();
}
