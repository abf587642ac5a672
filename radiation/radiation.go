// Package radiation says where the sun is, how much light arrives above the canopy,
// how it parts into beam and diffuse, how much of it is PAR, and how the diffuse part is
// spread over the sky. It knows nothing of trees, leaves or files.
//
// Angles are radians, azimuths clockwise from true north, zenith angles from the true vertical.
package radiation

// Site is a place on the Earth.
type Site struct {
	Latitude  float64 // rad, north positive, -pi/2..pi/2
	Longitude float64 // rad, east positive, -pi..pi
	UTCOffset float64 // h, local standard time minus UTC, fixed through the year
	Elevation float64 // m above sea level
}

// Sun is the geometric (unrefracted) topocentric place of the sun's centre.
type Sun struct {
	Elevation float64 // rad above the true horizon
	Azimuth   float64 // rad clockwise from true north, 0..2pi
	Distance  float64 // AU
}

// Sky is how diffuse light is spread over the sky: Uniform, Overcast or AllWeather.
type Sky interface{ sky() }

// Uniform is a sky of equal radiance.
type Uniform struct{}

// Overcast is the standard overcast sky, R ~ 1 + 2 cos(theta) (Moon & Spencer 1942).
type Overcast struct{}

// AllWeather is the sky of Perez, Seals & Michalsky (1993): bright round the sun and near the
// horizon as the sky clears.
type AllWeather struct{}

func (Uniform) sky()    {}
func (Overcast) sky()   {}
func (AllWeather) sky() {}
