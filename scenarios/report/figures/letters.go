package figures

import (
	"image/color"
	"math"
	"strings"
	"sync"

	"golang.org/x/image/font/gofont/goregular"
	"golang.org/x/image/font/opentype"
	"golang.org/x/image/font/sfnt"
	"gonum.org/v1/plot"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// face readies the font once: the usual one of the library drops glyphs that units need.
var face = sync.OnceValue(func() error {
	parsed, err := opentype.Parse(goregular.TTF)
	if err != nil {
		return err
	}
	f := font.Font{Typeface: "Go"}
	font.DefaultCache.Add([]font.Face{{Font: f, Face: parsed}})
	plot.DefaultFont, plotter.DefaultFont = f, f
	return nil
})

// unknown stands for a letter that the font lacks.
const unknown = '□'

// legible is a text on one line, with a box for every letter that the font lacks; the library would drop them without a word.
func legible(s string) string {
	f, err := sfnt.Parse(goregular.TTF)
	if err != nil {
		return s
	}
	var b sfnt.Buffer
	return strings.Map(func(r rune) rune {
		if r == '\n' || r == '\t' || r == '\r' || r == '\u00a0' || r == '\u202f' {
			return ' '
		}
		if i, err := f.GlyphIndex(&b, r); err != nil || i == 0 || r < ' ' {
			return unknown
		}
		return r
	}, s)
}

// letters of a size, points.
func letters(size vg.Length, x draw.XAlignment, y draw.YAlignment) draw.TextStyle {
	return draw.TextStyle{Color: color.Black, Font: font.From(plot.DefaultFont, size), Handler: plot.DefaultTextHandler, XAlign: x, YAlign: y}
}

// lift brings the middle of digits and small letters to where the middle of a text is asked for, in sizes.
const lift = 0.13

// upright are letters that read from below.
func upright(size vg.Length) draw.TextStyle {
	t := letters(size, draw.XCenter, draw.YTop)
	t.Rotation = math.Pi / 2
	return t
}

// length of a text before it is turned.
func length(t draw.TextStyle, s string) vg.Length {
	t.Rotation = 0
	return t.Width(s)
}

// write fills a text into room: smaller letters first, down to three quarters, then without its middle.
func write(c draw.Canvas, t draw.TextStyle, at vg.Point, room vg.Length, s string) {
	if w := length(t, s); w > room {
		t.Font.Size *= max(0.75, room/w)
	}
	c.FillText(t, at, shortened(t, room, s))
}

// shortened is the text without as much of its middle as does not fit.
func shortened(t draw.TextStyle, room vg.Length, s string) string {
	const slack = 1e-6
	runes, out := []rune(s), s
	for n := len(runes) - 1; n > 0 && length(t, out) > room+slack; n-- {
		head := (n + 1) / 2
		out = strings.TrimRight(string(runes[:head]), " ,") + "…" + strings.TrimLeft(string(runes[len(runes)-(n-head):]), " ")
	}
	return out
}
