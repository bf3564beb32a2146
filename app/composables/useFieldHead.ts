/** What stands at the head of a field page. */
export interface FieldHead {
  title?: string
  sub?: string
  /** Where the arrow leads; the list of jobs where absent. */
  back?: string
}

/**
 * The words at the head of a job's field pages, which the parent page shows beside the tally. A page calls it with its own words ("outer face · pass 2 of 4");
 * what it leaves out is the site and the job. Without an argument it reads them.
 */
export function useFieldHead(words?: () => FieldHead) {
  const head = useState<FieldHead>('field-head', () => ({}))
  if (words) {
    let own: FieldHead = {}
    watchEffect(() => { head.value = own = words() })
    // The next page may have put its words there already.
    onBeforeUnmount(() => { if (toRaw(head.value) === own) head.value = {} })
  }
  return head
}
