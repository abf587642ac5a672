// Package canopy is the theory of light in a stand: layers carrying leaf and wood area, leaf
// angles, outlines of openings on slopes, and the share of light from a direction that reaches a
// point. It takes the share of leaf present from its caller; it knows no calendar and no watts.
//
// x east, y north, z up, metres; azimuth clockwise from true north; radians. Heights are vertical
// above the ground at that spot. Areas are hemisurface per level ground.
package canopy

// Layer is foliage and wood spread evenly between two heights.
type Layer struct {
	Bottom, Top float64 // m above ground, 0 <= Bottom < Top
	LAI, WAI    float64 // hemisurface, m2 per m2 of level ground, >= 0
	Chi         float64 // ellipsoidal leaf angle parameter, > 0; 1 is spherical
	Clumping    float64 // Omega, 0 < Omega <= 1 (up to 1.2 for regular)
	Absorptance float64 // leaf absorptance of PAR, 0..1
	Phenology   int     // index of the layer's leaf calendar: Transmit takes the share of leaf by it
}

// Ground is the plane of the slope.
type Ground struct {
	Slope  float64 // rad, >= 0
	Aspect float64 // rad, downslope azimuth
}

// Point is a spot where light is asked for; x_m, y_m horizontal from the opening's centre.
type Point struct {
	X, Y   float64 // m
	Height float64 // m above the ground there
}

// Direction towards the sky.
type Direction struct {
	Elevation float64 // rad, > 0
	Azimuth   float64 // rad
}

// Dome divides the upper hemisphere into rings of zenith angle, each into the same number of
// equal sectors of azimuth from north. Cell index = ring*Sectors + sector.
type Dome struct {
	Zenith  []float64 // rad, ring bounds, 0 .. pi/2, ascending; rings = len-1
	Sectors int
	// Azimuths is the number of directions per sector along which the sky is integrated.
	Azimuths int
}

// Outline is a closed plan outline about its centre, the origin: Circle, Ellipse, Strip or Polygon.
// Crown outlines bound foliage.
type Outline interface {
	Contains(x, y float64) bool
	Area() float64 // m2
	// cross appends the distances s > 0, ascending, at which a ray from (x, y) along the unit vector
	// (ux, uy) passes the outline.
	cross(x, y, ux, uy float64, dst []float64) []float64
	grow(d float64) (Outline, error)
}

// vertex is a corner of an outline.
type vertex struct{ x, y float64 }

// Horizon is the terrain horizon: elevation by azimuth, linear between points, none when empty.
type Horizon struct {
	Azimuth   []float64 // rad, ascending
	Elevation []float64 // rad
}
