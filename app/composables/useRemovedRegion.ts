/** The region that was put in the bin last, while this page is open: the list offers it back. */
export function useRemovedRegion() {
  return useState<{ id: string, revision: number, name: string } | null>('removed-region', () => null)
}
