package figures

import (
	"bytes"
	"encoding/xml"
	"errors"
	"image"
	"image/color"
	"image/png"
	"io"
	"math"
	"slices"
	"strings"
	"testing"

	"golang.org/x/image/font/gofont/goregular"
	"golang.org/x/image/font/sfnt"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgimg"
)

func bent(top, below float64) []Point {
	var out []Point
	for x := 0.0; x <= 2000; x += 20 {
		out = append(out, Point{x, top*x/(x+200) - below})
	}
	return out
}

func sample(panels int) Figure {
	f := Figure{X: "light, µmol m⁻² s⁻¹", Y: "net assimilation, µmol CO₂ m⁻² s⁻¹"}
	for i := range panels {
		title := "leaf " + string(rune('a'+i))
		if panels == 1 {
			title = "Quercus rubra, northern red oak"
		}
		f.Panels = append(f.Panels, Panel{Title: title, Curves: []Curve{
			{Name: "grown in 5 % of full light", Line: bent(6, 0.4), Low: bent(5, 0.6), High: bent(7, 0.2)},
			{Name: "grown in full light", Line: bent(13, 1.4), Low: bent(10, 5.9), High: bent(16, 0.9), Readings: []Point{{0, -1.5}, {300, 6.6}, {1500, 10.4}}},
		}})
	}
	return f
}

func drawn(t *testing.T, f Figure, k Kind) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := Write(&b, f, k); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func TestSameFigureSameBytes(t *testing.T) {
	for _, k := range []Kind{SVG, PNG} {
		for _, n := range []int{1, 7} {
			if !bytes.Equal(drawn(t, sample(n), k), drawn(t, sample(n), k)) {
				t.Errorf("kind %d, %d panels: two draws differ", k, n)
			}
		}
	}
}

func TestSVGIsWellFormedAndSaysItsUnits(t *testing.T) {
	body := drawn(t, sample(2), SVG)
	d := xml.NewDecoder(bytes.NewReader(body))
	for {
		if _, err := d.Token(); errors.Is(err, io.EOF) {
			break
		} else if err != nil {
			t.Fatal(err)
		}
	}
	for _, want := range []string{"light, µmol m⁻² s⁻¹", ">−5<", "net assimilation, µmol CO₂ m⁻² s⁻¹", "grown in full light", "full light"} {
		if !strings.Contains(string(body), want) {
			t.Errorf("the figure does not say %q", want)
		}
	}
}

// over is a colour on another, as the picture shows it.
func over(top color.NRGBA, below color.RGBA) color.RGBA {
	mix := func(t, b uint8) uint8 {
		return uint8(math.Round((float64(t)*float64(top.A) + float64(b)*(255-float64(top.A))) / 255))
	}
	return color.RGBA{mix(top.R, below.R), mix(top.G, below.G), mix(top.B, below.B), 255}
}

// painted is the picture of a figure with one panel and its axes in pixels.
func painted(t *testing.T, f Figure) (image.Image, image.Rectangle) {
	t.Helper()
	img, err := png.Decode(bytes.NewReader(drawn(t, f, PNG)))
	if err != nil {
		t.Fatal(err)
	}
	s := newSheet(&f)
	c := s.axes(draw.New(vgimg.New(s.width, s.height)), 0)
	pixel := func(v vg.Length) int { return int(math.Round(float64(v) / 72 * dpi)) }
	return img, image.Rect(pixel(c.Min.X), pixel(s.height-c.Max.Y), pixel(c.Max.X), pixel(s.height-c.Min.Y))
}

// Two bands over each other cover what lies between their sides and nothing else, and both show through where they meet; the line of zero is
// seen through a band.
func TestBandsAreWhereTheyShouldBe(t *testing.T) {
	flat := func(y float64) []Point { return []Point{{0, y}, {100, y}} }
	f := Figure{X: "x", Y: "y", Panels: []Panel{{Curves: []Curve{{Line: flat(5), Low: flat(2), High: flat(8)}, {Line: flat(6), Low: flat(-4), High: flat(4)}}}}}
	img, axes := painted(t, f)
	if got := img.Bounds().Size(); got.X != 1260 || got.Y != 787 {
		t.Errorf("%v pixels; 16 x 10 cm at 200 dpi wanted", got)
	}
	s := newSheet(&f)
	white := color.RGBA{255, 255, 255, 255}
	first, second := over(style[0].band(), white), over(style[1].band(), white)
	for _, c := range []struct {
		y    float64
		want color.RGBA
	}{{8.2, white}, {7, first}, {4.5, first}, {3, over(style[1].band(), first)}, {1, second}, {-3.8, second}, {-4.15, white}, {0, color.RGBA{85, 85, 85, 255}}, {5, color.RGBA{0, 90, 150, 255}}} {
		row := axes.Max.Y - int(float64(axes.Dy())*(c.y-s.low.Y)/(s.high.Y-s.low.Y))
		for _, share := range []float64{0.1, 0.52, 0.9} {
			x, found := axes.Min.X+int(share*float64(axes.Dx())), false
			for y := row - 1; y <= row+1; y++ {
				r, g, b, _ := img.At(x, y).RGBA()
				far := max(math.Abs(float64(r>>8)-float64(c.want.R)), math.Abs(float64(g>>8)-float64(c.want.G)), math.Abs(float64(b>>8)-float64(c.want.B)))
				found = found || far <= 3 || c.y == 0 && r>>8 < 110 // a thin line between two rows of pixels
			}
			if !found {
				t.Errorf("at y = %g, %g of the axis: %v; %v wanted", c.y, share, img.At(x, row), c.want)
			}
		}
	}
}

// Curves differ in dashes and in shapes of readings; the first three differ clearly in grey too.
func TestCurvesDifferInGrey(t *testing.T) {
	grey := func(l look) float64 {
		return (0.299*float64(l.color.R) + 0.587*float64(l.color.G) + 0.114*float64(l.color.B)) / 255
	}
	for i, a := range style {
		for _, b := range style[:i] {
			if slices.Equal(a.dashes, b.dashes) || a.shape == b.shape {
				t.Errorf("%v and %v look alike without colour", a, b)
			}
			if i < 3 && math.Abs(grey(a)-grey(b)) < 0.15 {
				t.Errorf("greys %.2f and %.2f", grey(a), grey(b))
			}
		}
	}
}

// One wide band leaves the other curves legible.
func TestWideBandDoesNotFlattenTheRest(t *testing.T) {
	f := examples()["wild"]
	s := newSheet(&f)
	if s.high.Y > 45 || s.low.Y < -20 {
		t.Errorf("y axis %g to %g for curves of 0 to 15", s.low.Y, s.high.Y)
	}
}

func TestTicks(t *testing.T) {
	for _, c := range []struct {
		low, high float64
		want      string
	}{{-30, 2030, "0 500 1000 1500 2000"}, {-2.3, 14, "0 5 10"}, {-0.04, 1.04, "0.0 0.2 0.4 0.6 0.8 1.0"}, {-7, 14, "−5 0 5 10"}, {0, 0.0003, "0.0000 0.0001 0.0002 0.0003"}} {
		var got []string
		for _, k := range ticks(c.low, c.high) {
			got = append(got, k.Label)
		}
		if strings.Join(got, " ") != c.want {
			t.Errorf("%g to %g: %v; want %s", c.low, c.high, got, c.want)
		}
	}
}

func TestEveryGlyphIsInTheFont(t *testing.T) {
	f, err := sfnt.Parse(goregular.TTF)
	if err != nil {
		t.Fatal(err)
	}
	var b sfnt.Buffer
	all := "µ⁻¹²³₂ ,%−–…□θφ°öäåøçéABCxyz0123456789"
	for _, f := range examples() {
		all += f.X + f.Y
		for _, p := range f.Panels {
			all += p.Title
			for _, c := range p.Curves {
				all += c.Name
			}
			for _, m := range p.Marks {
				all += m.Name
			}
		}
	}
	for _, r := range all {
		if i, err := f.GlyphIndex(&b, r); err != nil || i == 0 {
			t.Errorf("no glyph for %q", r)
		}
	}
}

// What the font lacks is a box, in SVG too; a text cannot break the file.
func TestUnknownLettersAreSeen(t *testing.T) {
	f := sample(1)
	f.Panels[0].Title = "樹 <a&b>\x01\nleaf"
	body := string(drawn(t, f, SVG))
	if want := "□ &lt;a&amp;b&gt;□ leaf"; !strings.Contains(body, want) {
		t.Errorf("no %q", want)
	}
}

func TestFiguresThatCannotBeDrawn(t *testing.T) {
	broken := func(change func(f *Figure)) Figure {
		f := sample(1)
		change(&f)
		return f
	}
	for want, f := range map[string]Figure{
		"without panels": {},
		"0 curves":       {Panels: []Panel{{}}},
		"no points":      {Panels: []Panel{{Curves: []Curve{{Name: "a"}}}}},
		"61 panels":      sample(61),
		"11 columns":     broken(func(f *Figure) { f.Columns = 11 }),
		"curves named":   broken(func(f *Figure) { f.Panels[0].Curves[1].Name = f.Panels[0].Curves[0].Name }),
		"points below":   broken(func(f *Figure) { f.Panels[0].Curves[0].Low = f.Panels[0].Curves[0].Low[:4] }),
		"light: a point": broken(func(f *Figure) { f.Panels[0].Curves[0].Line[3].Y = math.NaN() }),
		"full light":     broken(func(f *Figure) { f.Panels[0].Curves[1].Readings[0].X = math.Inf(-1) }),
		"mark \"m\"":     broken(func(f *Figure) { f.Panels[0].Marks = []Mark{{math.NaN(), "m"}} }),
		"7 names": broken(func(f *Figure) {
			for i := range 5 {
				f.Panels = append(f.Panels, Panel{Curves: []Curve{{Name: string(rune('a' + i)), Line: bent(1, 0)}}})
			}
		}),
	} {
		var b bytes.Buffer
		if err := Write(&b, f, SVG); err == nil || !strings.Contains(err.Error(), want) || b.Len() > 0 {
			t.Errorf("%v, %d bytes; want %q and none", err, b.Len(), want)
		}
	}
}

// Figures with hardly anything in them are drawn.
func TestPoorFigures(t *testing.T) {
	for name, c := range map[string]Curve{
		"one point": {Line: []Point{{0, 0}}}, "one reading": {Readings: []Point{{5, -3}}}, "flat at zero": {Line: []Point{{0, 0}, {9, 0}}},
		"a band only": {Low: []Point{{0, 1}, {5, 2}}, High: []Point{{0, 3}, {5, 4}}}, "huge": {Line: []Point{{0, -1e9}, {1e9, 1e9}}}, "tiny": {Line: []Point{{0, 0}, {1e-9, 1e-9}}},
	} {
		for _, k := range []Kind{SVG, PNG} {
			if body := drawn(t, Figure{Panels: []Panel{{Curves: []Curve{c}}}}, k); bytes.Contains(body[:min(len(body), 1<<20)], []byte("NaN")) && k == SVG {
				t.Errorf("%s: NaN in the file", name)
			}
		}
	}
}
