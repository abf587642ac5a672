package canopy

import (
	"errors"
	"fmt"
	"math"
)

// Opening is a plan outline with a profile of its own: the matrix has no layer in it.
type Opening struct {
	Outline Outline
	Inside  *Profile
}

// Stand is a matrix with openings on a slope under a terrain horizon. Ground and canopy are parallel planes.
type Stand struct {
	matrix   *Profile
	openings []Opening
	ground   Ground
	horizon  Horizon
	profiles []*Profile // matrix, then each opening's
	groups   int        // number of phenology indices
	tanSlope float64
	top      float64 // highest layer bound of all profiles, m
}

// NewStand puts a stand together.
func NewStand(matrix *Profile, openings []Opening, ground Ground, horizon Horizon) (*Stand, error) {
	if matrix == nil {
		return nil, errors.New("a stand needs a matrix; use a profile without layers for open ground")
	}
	if !(ground.Slope >= 0 && ground.Slope < 80*math.Pi/180) {
		return nil, fmt.Errorf("slope is %.3g degrees; it must be 0 to 80", ground.Slope*180/math.Pi)
	}
	if len(horizon.Azimuth) != len(horizon.Elevation) {
		return nil, errors.New("the horizon needs an elevation for every azimuth")
	}
	for i := 1; i < len(horizon.Azimuth); i++ {
		if horizon.Azimuth[i] <= horizon.Azimuth[i-1] {
			return nil, errors.New("the horizon's azimuths must rise")
		}
	}
	s := &Stand{matrix: matrix, ground: ground, horizon: horizon, profiles: []*Profile{matrix}, tanSlope: math.Tan(ground.Slope)}
	s.groups = matrix.phenology
	for _, o := range openings {
		if o.Outline.Area() == 0 {
			continue
		}
		s.openings = append(s.openings, o)
		s.profiles = append(s.profiles, o.Inside)
		s.groups = max(s.groups, o.Inside.phenology)
	}
	for _, p := range s.profiles {
		s.top = math.Max(s.top, p.Top())
	}
	return s, nil
}

// At is the elevation of the horizon (rad) at an azimuth, linear between its points; 0 without any.
func (h Horizon) At(azimuth float64) float64 {
	n := len(h.Azimuth)
	if n == 0 {
		return 0
	}
	const turn = 2 * math.Pi
	φ := math.Mod(math.Mod(azimuth, turn)+turn, turn)
	i := 0
	for i < n && h.Azimuth[i] <= φ {
		i++
	}
	a, b := (i+n-1)%n, i%n
	span := math.Mod(h.Azimuth[b]-h.Azimuth[a]+turn, turn)
	if span == 0 {
		return h.Elevation[a]
	}
	f := math.Mod(φ-h.Azimuth[a]+turn, turn) / span
	return h.Elevation[a] + f*(h.Elevation[b]-h.Elevation[a])
}

// stretch is a piece of a ray's ground track in one profile, to distance To.
type stretch struct {
	profile int
	to      float64
}

// track follows the ground under a ray: which profile it runs over, until the last, which has no end.
func (s *Stand) track(x, y, ux, uy float64, buf []float64, dst []stretch) ([]stretch, []float64) {
	switch len(s.openings) {
	case 0:
		return append(dst, stretch{0, math.Inf(1)}), buf
	case 1:
		buf = s.openings[0].Outline.cross(x, y, ux, uy, buf[:0])
		at := len(buf) % 2 // a ray ends in the matrix; told so, a point on the outline itself is safe
		for _, d := range buf {
			dst = append(dst, stretch{at, d})
			at = 1 - at
		}
		return append(dst, stretch{0, math.Inf(1)}), buf
	}
	return s.trackMany(x, y, ux, uy, buf, dst)
}

// trackMany is track among several openings that do not overlap.
func (s *Stand) trackMany(x, y, ux, uy float64, buf []float64, dst []stretch) ([]stretch, []float64) {
	from, at := 0.0, 0
	for i, o := range s.openings {
		if buf = o.Outline.cross(x, y, ux, uy, buf[:0]); len(buf)%2 == 1 {
			at = i + 1
		}
	}
	for {
		next, to := math.Inf(1), 0
		for i, o := range s.openings {
			buf = o.Outline.cross(x, y, ux, uy, buf[:0])
			for _, d := range buf {
				if d > from+1e-9 && d < next {
					next, to = d, i+1
				}
			}
		}
		if math.IsInf(next, 1) {
			return append(dst, stretch{0, next}), buf
		}
		dst = append(dst, stretch{at, next})
		if at == 0 {
			at = to
		} else {
			at = 0
		}
		from = next
	}
}
