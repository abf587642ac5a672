package scenarios_test

import "math"

// A second calculation of light and ledger, kept plain: small steps along rays, grids over the sky, the crown and the leaf
// angles, every step of the year at every scale. It shares no code with the program.

const rad = math.Pi / 180

type bruteLayer struct {
	from, to, lai, wai, chi, clumping, absorptance float64
	share                                          func(day int) float64 // of leaf, by day of the year 0..364
}

type bruteSet struct{ amax, rd, phi, theta, lma, light float64 }

type brutePlant struct {
	height, leafArea, leafMass, stem, root, crownLAI, chi, absorptance float64
	rate, rateT, rateQ10                                               float64
	sun, shade                                                         bruteSet
	tRef, tOpt, tWidth, q10                                            float64
	deciduous                                                          bool
	share                                                              func(day int) float64
	lifespan, fineShare, fineLife, cost                                float64
}

type bruteCase struct {
	lat, lon, offset, slope, aspect float64 // degrees, h; slope as tangent
	overcast                        bool
	stepMinutes                     int
	inside                          func(x, y float64) bool
	matrix, opening                 []bruteLayer
	global, temperature             []float64 // by hour of the year
	season, leafOn                  func(day int) bool
}

// sunAt is elevation and azimuth (rad) and distance after the Astronomical Almanac's low-precision formulas (Michalsky
// 1988, Solar Energy 40:227-235), good to 0.01 deg.
func sunAt(day int, hour float64, c *bruteCase) (elevation, azimuth, distance float64) {
	// 2015 January 1, 0 h UT is JD 2457023.5
	n := 2457023.5 + float64(day) + (hour-c.offset)/24 - 2451545.0
	L := 280.460 + 0.9856474*n
	g := (357.528 + 0.9856003*n) * rad
	λ := (L + 1.915*math.Sin(g) + 0.020*math.Sin(2*g)) * rad
	ε := (23.439 - 0.0000004*n) * rad
	ra := math.Atan2(math.Cos(ε)*math.Sin(λ), math.Cos(λ))
	dec := math.Asin(math.Sin(ε) * math.Sin(λ))
	ut := (n + 0.5 - math.Floor(n+0.5)) * 24
	gmst := 6.697375 + 0.0657098242*n + ut
	H := (gmst*15+c.lon)*rad - ra
	φ := c.lat * rad
	sinE := math.Sin(φ)*math.Sin(dec) + math.Cos(φ)*math.Cos(dec)*math.Cos(H)
	east := -math.Cos(dec) * math.Sin(H)
	north := math.Cos(φ)*math.Sin(dec) - math.Sin(φ)*math.Cos(dec)*math.Cos(H)
	return math.Asin(sinE), math.Atan2(east, north), 1.00014 - 0.01671*math.Cos(g) - 0.00014*math.Cos(2*g)
}

// project is the ellipsoidal G.
func project(chi, θ float64) float64 {
	if chi == 1 {
		return 0.5
	}
	return math.Sqrt(chi*chi*math.Pow(math.Cos(θ), 2)+math.Pow(math.Sin(θ), 2)) / (chi + 1.774*math.Pow(chi+1.182, -0.733))
}

// march walks along a ray from (x, y, z) in small steps; depth of leaves by layer of matrix then opening, and of wood.
func (c *bruteCase) march(x, y, z, β, φ float64) (leaf []float64, wood float64, blocked bool) {
	leaf = make([]float64, len(c.matrix)+len(c.opening))
	m := math.Tan(β) + c.slope*math.Cos(φ-c.aspect*rad)
	if m <= 1e-9 {
		return leaf, 0, true
	}
	top, ds := 0.0, math.Min(0.05, 0.02/m)
	sin, cos := math.Sincos(φ)
	// depth of leaves and of wood that a step adds in each layer
	stepLeaf, stepWood := make([]float64, len(leaf)), make([]float64, len(leaf))
	for i := range leaf {
		l := c.layer(i)
		top = math.Max(top, l.to)
		path := ds / math.Cos(β) / (l.to - l.from) * l.clumping
		stepLeaf[i], stepWood[i] = project(l.chi, math.Pi/2-β)*l.lai*path, 0.5*l.wai*path
	}
	for s := ds / 2; z+s*m < top; s += ds {
		h := z + s*m
		list, base := c.matrix, 0
		if c.inside != nil && c.inside(x+s*sin, y+s*cos) {
			list, base = c.opening, len(c.matrix)
		}
		for i := range list {
			if l := &list[i]; h > l.from && h < l.to {
				leaf[base+i] += stepLeaf[base+i]
				wood += stepWood[base+i]
			}
		}
		if wood > 40 {
			break
		}
	}
	return leaf, wood, false
}

func (c *bruteCase) layer(i int) *bruteLayer {
	if i < len(c.matrix) {
		return &c.matrix[i]
	}
	return &c.opening[i-len(c.matrix)]
}

// through gives P0 and T of a ray on a day.
func (c *bruteCase) through(leaf []float64, wood float64, day int) (p0, t float64) {
	a, b := wood, wood
	for i, τ := range leaf {
		l := c.layer(i)
		a += τ * l.share(day)
		b += τ * l.share(day) * math.Sqrt(l.absorptance)
	}
	return math.Exp(-a), math.Exp(-b)
}

const skyRows, skyColumns = 90, 120

// bruteStep is one lit moment.
type bruteStep struct {
	day            int
	θ, T           float64
	Ib, D          float64 // level plane above, PPFD
	p0, t          float64
	seconds        float64
	skyRow         *[skyRows]float64 // integral over azimuth of R T, by zenith row
	openRow        *[skyRows]float64
	skyPlane, down float64
}

type bruteRegime struct {
	c     *bruteCase
	steps []bruteStep
	night []bruteStep
}

// regime works a spot out.
func (c *bruteCase) regime(x, y, z float64) *bruteRegime {
	r := &bruteRegime{c: c}
	type direction struct {
		row     int
		leaf    []float64
		wood    float64
		blocked bool
	}
	var sky []direction
	dθ, dφ := math.Pi/2/skyRows, 2*math.Pi/skyColumns
	for i := range skyRows {
		for j := range skyColumns {
			d := direction{row: i}
			d.leaf, d.wood, d.blocked = c.march(x, y, z, math.Pi/2-(float64(i)+0.5)*dθ, (float64(j)+0.5)*dφ)
			sky = append(sky, d)
		}
	}
	var open [skyRows]float64
	radiance := func(i int) float64 {
		if c.overcast {
			return 3 / (7 * math.Pi) * (1 + 2*math.Cos((float64(i)+0.5)*dθ))
		}
		return 1 / math.Pi
	}
	for i := range open {
		open[i] = radiance(i) * 2 * math.Pi
	}
	var last [32]float64
	var row *[skyRows]float64
	per := 60 / c.stepMinutes
	for day := range 365 {
		same := row != nil
		for i := range len(c.matrix) + len(c.opening) {
			same = same && last[i] == c.layer(i).share(day)
			last[i] = c.layer(i).share(day)
		}
		if !same {
			row = new([skyRows]float64)
			for _, d := range sky {
				if !d.blocked {
					_, t := c.through(d.leaf, d.wood, day)
					row[d.row] += t * radiance(d.row) * dφ
				}
			}
		}
		plane := 0.0
		for i := range row {
			θ := (float64(i) + 0.5) * dθ
			plane += row[i] * math.Cos(θ) * math.Sin(θ) * dθ
		}
		for hour := range 24 {
			var el, az, top [60]float64
			mean := 0.0
			for k := range per {
				var dist float64
				el[k], az[k], dist = sunAt(day, float64(hour)+(float64(k)+0.5)/float64(per), c)
				top[k] = math.Max(0, 1361/dist/dist*math.Sin(el[k]))
				mean += top[k] / float64(per)
			}
			at := day*24 + hour
			for k := range per {
				s := bruteStep{day: day, T: c.temperature[at], seconds: 3600 / float64(per)}
				if el[k] <= 0 {
					r.night = append(r.night, s)
					continue
				}
				kt := c.global[at] / mean
				G := kt * top[k]
				q := erbs(math.Min(kt, 1))
				qp := math.Min(1, q*(1+0.3*(1-q*q)))
				Q := G * 0.45 * 4.57
				s.θ, s.D, s.Ib = math.Pi/2-el[k], qp*Q, (1-qp)*Q
				if leaf, wood, blocked := c.march(x, y, z, el[k], az[k]); !blocked {
					s.p0, s.t = c.through(leaf, wood, day)
				}
				s.skyRow, s.openRow = row, &open
				s.skyPlane, s.down = s.D*plane, s.Ib*(s.t-s.p0)
				r.steps = append(r.steps, s)
			}
		}
	}
	return r
}

// erbs is the hourly diffuse share, as printed in 1982.
func erbs(k float64) float64 {
	if k <= 0.22 {
		return 1 - 0.09*k
	}
	if k <= 0.8 {
		return 0.9511 - 0.1604*k + 4.388*k*k - 16.638*k*k*k + 12.336*k*k*k*k
	}
	return 0.165
}

// percent of full light of the regime scaled by k.
func (r *bruteRegime) percent(k float64, days func(int) bool) float64 {
	spot, full := 0.0, 0.0
	for i := range r.steps {
		s := &r.steps[i]
		if !days(s.day) {
			continue
		}
		c := math.Min(1, k*s.p0)
		spot += c*s.Ib + math.Min(k*s.skyPlane, s.D) + math.Min(k*s.down, s.Ib*(1-c))
		full += s.Ib + s.D
	}
	return 100 * spot / full
}

func (p *brutePlant) set(light float64) bruteSet {
	if p.sun == p.shade {
		return p.sun
	}
	L := math.Max(1, math.Min(100, light))
	s := (math.Log(L) - math.Log(p.shade.light)) / (math.Log(p.sun.light) - math.Log(p.shade.light))
	s = math.Max(0, math.Min(1, s))
	mix := func(a, b float64) float64 { return a + s*(b-a) }
	ag := mix(p.shade.amax+p.shade.rd, p.sun.amax+p.sun.rd)
	rd := mix(p.shade.rd, p.sun.rd)
	return bruteSet{ag - rd, rd, mix(p.shade.phi, p.sun.phi), mix(p.shade.theta, p.sun.theta), mix(p.shade.lma, p.sun.lma), light}
}

const bruteDepths, bruteAngles = 10, 20

// ledger gives the lines of a year, g C: income, sunfleck, leaf day, leaf night, stem, root, leaf and root replacement.
func (r *bruteRegime) ledger(p *brutePlant, k, light float64) (l [8]float64) {
	set := p.set(light)
	A := p.leafMass / set.lma
	f := func(T float64) float64 { return math.Exp(-math.Pow((T-p.tOpt)/p.tWidth, 2)) }
	dθ := math.Pi / 2 / skyRows
	dl := p.crownLAI / bruteDepths
	type shapes struct{ sky, open, down [bruteDepths]float64 }
	known := map[*[skyRows]float64]*shapes{}
	for i := range r.steps {
		s := &r.steps[i]
		on := p.share(s.day)
		rd := set.rd * math.Pow(p.q10, (s.T-p.tRef)/10)
		gram := s.seconds * 12.011e-6
		l[2] += A * on * rd * gram
		if on == 0 {
			continue
		}
		d := known[s.skyRow]
		if d == nil {
			d = &shapes{}
			for j := range bruteDepths {
				depth := (float64(j) + 0.5) * dl
				for row := range skyRows {
					θ := (float64(row) + 0.5) * dθ
					G := project(p.chi, θ)
					e := G * math.Exp(-math.Sqrt(p.absorptance)*G*depth/math.Cos(θ)) * math.Sin(θ) * dθ
					d.sky[j] += s.skyRow[row] * e
					d.open[j] += s.openRow[row] * e
					d.down[j] += 2 * e
				}
			}
			known[s.skyRow] = d
		}
		ag := (set.amax + set.rd) * f(s.T) / f(p.tRef)
		c := math.Min(1, k*s.p0)
		down := math.Min(k*s.down, s.Ib*(1-c))
		In := s.Ib / math.Cos(s.θ)
		G := project(p.chi, s.θ)
		mu, w := incidences(p.chi, s.θ)
		for j := range bruteDepths {
			Id := s.D*math.Min(k*d.sky[j], d.open[j]) + down*d.down[j]
			P := hyperbola(Id, ag, set.phi, set.theta)
			sunlit := c * math.Exp(-G*(float64(j)+0.5)*dl/math.Cos(s.θ))
			mean := 0.0
			if sunlit > 0 && In > 0 {
				for i := range mu {
					mean += w[i] * hyperbola(Id+In*mu[i], ag, set.phi, set.theta)
				}
				l[1] += sunlit * (mean - P) / bruteDepths * A * on * gram
			}
			l[0] += P / bruteDepths * A * on * gram
		}
	}
	l[0] += l[1]
	for _, s := range r.night {
		l[3] += A * p.share(s.day) * set.rd * math.Pow(p.q10, (s.T-p.tRef)/10) * s.seconds * 12.011e-6
	}
	for _, list := range [][]bruteStep{r.steps, r.night} {
		for i := range list {
			g := p.rate * 1e-9 * 12.011 * list[i].seconds * math.Pow(p.rateQ10, (list[i].T-p.rateT)/10)
			l[4] += g * p.stem
			l[5] += g * p.root
		}
	}
	life := p.lifespan
	if p.deciduous {
		life = math.Max(1, life)
	}
	l[6] = p.leafMass / life * p.cost
	l[7] = p.root * p.fineShare / p.fineLife * p.cost
	return l
}

func net(l [8]float64) float64 { return l[0] - l[2] - l[3] - l[4] - l[5] - l[6] - l[7] }

func hyperbola(I, ag, phi, theta float64) float64 {
	b := phi*I + ag
	if I == 0 {
		return 0
	}
	return (b - math.Sqrt(b*b-4*theta*phi*I*ag)) / (2 * theta)
}

// incidences lists cosines of incidence with weights that sum to 1.
func incidences(chi, θ float64) (mu, w []float64) {
	sum := 0.0
	for i := range bruteAngles {
		if chi == 1 {
			for h := range 4 {
				mu = append(mu, (float64(4*i+h)+0.5)/bruteAngles/4)
				w = append(w, 1.0/bruteAngles/4)
			}
			continue
		}
		a := (float64(i) + 0.5) / bruteAngles * math.Pi / 2
		g := math.Sin(a) / math.Pow(math.Pow(math.Cos(a), 2)+chi*chi*math.Pow(math.Sin(a), 2), 2)
		for j := range bruteAngles {
			ψ := (float64(j) + 0.5) / bruteAngles * math.Pi
			mu = append(mu, math.Abs(math.Cos(θ)*math.Cos(a)+math.Sin(θ)*math.Sin(a)*math.Cos(ψ)))
			w = append(w, g)
			sum += g
		}
	}
	if chi != 1 {
		for i := range w {
			w[i] /= sum
		}
	}
	return mu, w
}

// breakEven finds the lowest scale at which the year's net crosses zero, every trial exact.
func (r *bruteRegime) breakEven(p *brutePlant) (season, leafOn float64, found bool) {
	at := func(k float64) float64 { return net(r.ledger(p, k, r.percent(k, r.c.leafOn))) }
	low := 0.02 / r.percent(1, r.c.leafOn)
	ratio := math.Pow(1e3/low, 1.0/24)
	a := low
	for at(a*ratio) < 0 {
		a *= ratio
		if a > 1e3 {
			return 0, 0, false
		}
	}
	b := a * ratio
	for range 11 {
		if m := math.Sqrt(a * b); at(m) < 0 {
			a = m
		} else {
			b = m
		}
	}
	k := math.Sqrt(a * b)
	return r.percent(k, r.c.season), r.percent(k, r.c.leafOn), true
}
