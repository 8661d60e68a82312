import { QueryTypes } from 'sequelize'
import { database, Place } from '@/models'

export type TreeForm = {
  nextTag: string
  recipes: { versionId: string; label: string; coatCount: number; isCalibrated: boolean }[]
  places: { id: string; name: string }[]
  works: { title: string; sections: string[] }[]
}

/** What the form of a tree offers: the next free tag, the newest version of each recipe, the places and the known works. */
export async function loadTreeForm(): Promise<TreeForm> {
  const [recipes, places, sections, lastTag] = await Promise.all([
    database.query<{ versionId: string; name: string; version: number; coatCount: number; calibratedAt: number | null }>(
      `SELECT v.id AS versionId, r.name, v.version, v.calibrated_at AS calibratedAt,
              (SELECT count(*) FROM recipe_coats c WHERE c.recipe_version_id = v.id) AS coatCount
         FROM recipes r JOIN recipe_versions v ON v.recipe_id = r.id
        WHERE v.version = (SELECT max(version) FROM recipe_versions WHERE recipe_id = r.id) ORDER BY r.name`,
      { type: QueryTypes.SELECT },
    ),
    Place.findAll({ where: { retiredAt: null }, order: [['name', 'ASC']] }),
    database.query<{ title: string; section: string }>(
      `SELECT w.title, s.name AS section FROM works w JOIN sections s ON s.work_id = w.id ORDER BY w.title, s.name`,
      { type: QueryTypes.SELECT },
    ),
    // The newest tree's own letters go on; ids are sortable by the moment they were made.
    database.query<{ tag: string }>('SELECT tag FROM trees ORDER BY id DESC LIMIT 1', { type: QueryTypes.SELECT }),
  ])
  const works = new Map<string, string[]>()
  for (const { title, section } of sections) works.set(title, [...(works.get(title) ?? []), ...(section === '' ? [] : [section])])
  return {
    nextTag: await nextFreeTag(lastTag[0]?.tag.split('-')[0] ?? 'T'),
    recipes: recipes.map((row) => ({
      versionId: row.versionId,
      label: `${row.name}, version ${row.version}`,
      coatCount: row.coatCount,
      isCalibrated: row.calibratedAt !== null,
    })),
    places: places.map(({ id, name }) => ({ id, name })),
    works: [...works].map(([title, names]) => ({ title, sections: names })),
  }
}

/** One more than the highest number that was ever used with these letters: a tag is unique for ever. */
async function nextFreeTag(letters: string): Promise<string> {
  const [row] = await database.query<{ highest: number | null }>(
    `SELECT max(CAST(substr(tag, :start) AS INTEGER)) AS highest FROM trees WHERE tag GLOB :pattern`,
    { type: QueryTypes.SELECT, replacements: { start: letters.length + 2, pattern: `${letters}-*` } },
  )
  return `${letters}-${(row?.highest ?? 100) + 1}`
}
