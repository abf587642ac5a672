package figures

import (
	"bytes"
	"math"
	"strings"
	"testing"
)

func someBars() Bars {
	return Bars{X: "margin, points", Key: "open: low, full: high", MarkName: "threshold", Panels: []BarPanel{
		{Title: "Oak", Middle: 19, Bars: []Bar{{"respiration", 30, -2}, {"leaf area", 17, 22}}},
		{Title: "Pine", Middle: 12, Bars: []Bar{{"quantum yield", 9, 15}}},
	}}
}

// Bars are drawn with every name, the same bytes each time, higher with more bars; what cannot be drawn is refused.
func TestBars(t *testing.T) {
	var one, two bytes.Buffer
	if err := WriteBars(&one, someBars(), SVG); err != nil {
		t.Fatal(err)
	}
	if err := WriteBars(&two, someBars(), SVG); err != nil || !bytes.Equal(one.Bytes(), two.Bytes()) {
		t.Errorf("the same bars give other bytes, %v", err)
	}
	for _, name := range []string{"Oak", "Pine", "respiration", "leaf area", "quantum yield", "threshold", "margin, points"} {
		if !strings.Contains(one.String(), ">"+name+"<") {
			t.Errorf("no %q in the figure", name)
		}
	}
	if strings.Count(one.String(), "stroke-dasharray") > 1 {
		t.Error("more than the line of the mark is dashed")
	}
	more := someBars()
	more.Panels[0].Bars = append(more.Panels[0].Bars, Bar{"chi", 18, 20})
	if more.height() <= (&Bars{Panels: someBars().Panels}).height() {
		t.Error("more bars are not higher")
	}
	for _, bad := range []Bars{{}, {Panels: []BarPanel{{Title: "none"}}}, {Panels: []BarPanel{{Bars: []Bar{{"x", math.NaN(), 1}}}}}} {
		if WriteBars(&bytes.Buffer{}, bad, PNG) == nil {
			t.Errorf("%+v was drawn", bad)
		}
	}
}
