import { stubPlaces, stubScene } from '@/lib/queries/office-stub'

export type TreeForm = {
  nextTag: string
  recipes: { versionId: string; label: string; coatCount: number; isCalibrated: boolean }[]
  places: { id: string; name: string }[]
  works: { title: string; sections: string[] }[]
}

export function loadTreeForm(): Promise<TreeForm> {
  const isEmpty = stubScene() === 'empty'
  return Promise.resolve({
    nextTag: isEmpty ? 'T-1' : 'T-127',
    recipes: [
      { versionId: '00000000-0000-4000-8000-f00000000001', label: 'Bronze 8', coatCount: 8, isCalibrated: false },
      { versionId: '00000000-0000-4000-8000-f00000000002', label: 'Bronze 14, large', coatCount: 14, isCalibrated: true },
    ],
    places: stubPlaces,
    works: isEmpty
      ? []
      : [
          { title: 'Otter Gate', sections: ['panel 1', 'panel 2', 'panel 3'] },
          { title: 'Kelp Bowl', sections: [''] },
        ],
  })
}
