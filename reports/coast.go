package reports

import (
	"encoding/json"
	"sync"
)

// coast returns the rings of the land that go generate brings, nil where it has not:
// longitude, latitude, longitude ... in hundredths of a degree. A map without it has
// everything but the coastline, and says so.
var coast = sync.OnceValue(func() [][]int {
	text, err := assets.ReadFile("assets/coastline.json")
	if err != nil {
		return nil
	}
	if _, err := assets.ReadFile("assets/coastline-licence.txt"); err != nil {
		return nil // never hand it on without saying whose it is
	}
	var rings [][]int
	if json.Unmarshal(text, &rings) != nil {
		return nil
	}
	return rings
})

// places makes a ring of the coast one of places.
func places(ring []int) []Place {
	list := make([]Place, len(ring)/2)
	for i := range list {
		list[i] = Place{LatitudeDeg: float64(ring[2*i+1]) / 100, LongitudeDeg: float64(ring[2*i]) / 100}
	}
	return list
}

// coastPlaces returns the rings of the land as places; nil where there are none.
var coastPlaces = sync.OnceValue(func() [][]Place {
	rings := coast()
	if rings == nil {
		return nil
	}
	land := make([][]Place, len(rings))
	for i := range rings {
		land[i] = places(rings[i])
	}
	return land
})
