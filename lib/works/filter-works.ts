/** Works whose title or sections carry every word typed, in any order. */
export function filterWorks<Row extends { title: string; sections: readonly string[] }>(works: readonly Row[], query: string): Row[] {
  const words = query.toLocaleLowerCase().split(/\s+/).filter(Boolean)
  return works.filter(({ title, sections }) => {
    const text = [title, ...sections].join(' ').toLocaleLowerCase()
    return words.every((word) => text.includes(word))
  })
}
