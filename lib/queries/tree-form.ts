import { QueryTypes } from 'sequelize'
import { database, Place } from '@/models'

export type TreeForm = {
  nextTag: string
  recipes: { versionId: string; label: string; coatCount: number; isCalibrated: boolean }[]
  places: { id: string; name: string }[]
  works: { title: string; editionSize: number | null; sections: string[] }[]
  /** Pieces on trees that are still open: a recast of one of them may be early. */
  openCasts: { workTitle: string; sectionName: string; editionNumber: number; tag: string }[]
}

/** What the form of a tree offers: the next free tag, the newest version of each recipe in use, the places and the known works. */
export async function loadTreeForm(): Promise<TreeForm> {
  const [recipes, places, sections, openCasts, lastTag] = await Promise.all([
    database.query<{ versionId: string; name: string; version: number; coatCount: number; calibratedAt: number | null }>(
      `SELECT v.id AS versionId, r.name, v.version, v.calibrated_at AS calibratedAt,
              (SELECT count(*) FROM recipe_coats c WHERE c.recipe_version_id = v.id) AS coatCount
         FROM recipes r JOIN recipe_versions v ON v.recipe_id = r.id
        WHERE r.retired_at IS NULL AND v.version = (SELECT max(version) FROM recipe_versions WHERE recipe_id = r.id) ORDER BY r.name`,
      { type: QueryTypes.SELECT },
    ),
    Place.findAll({ where: { retiredAt: null }, order: [['name', 'ASC']] }),
    database.query<{ title: string; editionSize: number | null; section: string }>(
      `SELECT w.title, w.edition_size AS editionSize, s.name AS section FROM works w JOIN sections s ON s.work_id = w.id ORDER BY w.title, s.name`,
      { type: QueryTypes.SELECT },
    ),
    database.query<TreeForm['openCasts'][number]>(
      `SELECT w.title AS workTitle, s.name AS sectionName, p.edition_number AS editionNumber, t.tag
         FROM trees t JOIN tree_pieces tp ON tp.tree_id = t.id JOIN pieces p ON p.id = tp.piece_id JOIN sections s ON s.id = p.section_id
         JOIN works w ON w.id = s.work_id
        WHERE t.released_at IS NULL AND t.scrapped_at IS NULL ORDER BY p.id`,
      { type: QueryTypes.SELECT },
    ),
    // The newest tree's own letters go on; ids are sortable by the moment they were made.
    database.query<{ tag: string }>('SELECT tag FROM trees ORDER BY id DESC LIMIT 1', { type: QueryTypes.SELECT }),
  ])
  const works = new Map<string, TreeForm['works'][number]>()
  for (const { title, editionSize, section } of sections) {
    const work = works.get(title) ?? { title, editionSize, sections: [] }
    if (section !== '') work.sections.push(section)
    works.set(title, work)
  }
  return {
    nextTag: await nextFreeTag(lastTag[0]?.tag.split('-')[0] ?? 'T'),
    recipes: recipes.map((row) => ({
      versionId: row.versionId,
      label: `${row.name}, version ${row.version}`,
      coatCount: row.coatCount,
      isCalibrated: row.calibratedAt !== null,
    })),
    places: places.map(({ id, name }) => ({ id, name })),
    works: [...works.values()],
    openCasts,
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
