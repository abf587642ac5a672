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
	"os"
	"strings"
	"testing"

	"golang.org/x/image/font/gofont/goregular"
	"golang.org/x/image/font/sfnt"
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
		f.Panels = append(f.Panels, Panel{title, []Curve{
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
	if dir := os.Getenv("FIGURES"); dir != "" {
		for name, body := range map[string][]byte{"one.png": drawn(t, sample(1), PNG), "seven.png": drawn(t, sample(7), PNG), "one.svg": drawn(t, sample(1), SVG)} {
			if err := os.WriteFile(dir+"/"+name, body, 0o644); err != nil {
				t.Fatal(err)
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

// A band covers what lies between its sides, and the line is drawn over it: a flat band of the first colour in the middle of the picture.
func TestBandIsWhereItShouldBe(t *testing.T) {
	flat := func(y float64) []Point { return []Point{{0, y}, {100, y}} }
	f := Figure{X: "x", Y: "y", Panels: []Panel{{"", []Curve{{Line: flat(5), Low: flat(2), High: flat(8)}}}}}
	img, err := png.Decode(bytes.NewReader(drawn(t, f, PNG)))
	if err != nil {
		t.Fatal(err)
	}
	if got := img.Bounds().Size(); math.Abs(float64(got.X)-16/2.54*dpi) > 2 || math.Abs(float64(got.Y)-10/2.54*dpi) > 2 {
		t.Errorf("size %v", got)
	}
	count := func(want color.NRGBA) (n int) {
		for y := range img.Bounds().Dy() {
			if r, g, b, _ := img.At(img.Bounds().Dx()/2, y).RGBA(); uint8(r>>8) == want.R && uint8(g>>8) == want.G && uint8(b>>8) == want.B {
				n++
			}
		}
		return n
	}
	band, line := count(style[0].band), count(style[0].line)
	axis := float64(plotHeight(img))
	if share := float64(band+line) / axis; math.Abs(share-6/8.64) > 0.03 || line < 3 {
		t.Errorf("the band takes %.2f of the axis (6 of 8.64 wanted), the line %d pixels", share, line)
	}
}

// plotHeight is the length of the vertical axis line in pixels: the longest dark column.
func plotHeight(img image.Image) (most int) {
	for x := range img.Bounds().Dx() / 4 {
		n := 0
		for y := range img.Bounds().Dy() {
			if r, _, _, _ := img.At(x, y).RGBA(); r>>8 < 160 {
				n++
			}
		}
		most = max(most, n)
	}
	return most
}

func TestEveryGlyphIsInTheFont(t *testing.T) {
	f, err := sfnt.Parse(goregular.TTF)
	if err != nil {
		t.Fatal(err)
	}
	var b sfnt.Buffer
	for _, r := range "µ⁻¹²³₂ ,%−–θφ°öäåøçéABCxyz0123456789" {
		if i, err := f.GlyphIndex(&b, r); err != nil || i == 0 {
			t.Errorf("no glyph for %q", r)
		}
	}
}

func TestFiguresThatCannotBeDrawn(t *testing.T) {
	bad := sample(1)
	bad.Panels[0].Curves[0].Line[3].Y = math.NaN()
	lame := sample(1)
	lame.Panels[0].Curves[0].Low = lame.Panels[0].Curves[0].Low[:4]
	for want, f := range map[string]Figure{"without panels": {}, "not a number": bad, "points below and": lame, "25 panels": sample(25),
		"0 curves": {Panels: []Panel{{}}}} {
		var b bytes.Buffer
		if err := Write(&b, f, SVG); err == nil || !strings.Contains(err.Error(), want) || b.Len() > 0 {
			t.Errorf("%v, %d bytes; want %q and none", err, b.Len(), want)
		}
	}
}
