package main

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"shadeledger/leaf"
	"shadeledger/scenarios/report"
)

// readings writes a file of light responses, of as many leaves as asked, each of its own plant.
func readings(t *testing.T, species string, leaves int, set leaf.Set) string {
	t.Helper()
	var b strings.Builder
	b.WriteString("species,plant,leaf,ppfd,net,tleaf\n")
	for k := range leaves {
		for _, ppfd := range []float64{0, 10, 25, 50, 100, 250, 600, 1100, 1800} {
			fmt.Fprintf(&b, "%s,p%d,l%d,%g,%.4f,24\n", species, k, k, ppfd, set.Net(ppfd))
		}
	}
	return written(t, "curves.csv", b.String())
}

// written puts text into a new folder.
func written(t *testing.T, name, text string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	return path
}

var oakLeaf = leaf.Set{Ag: 12, Rd: 1.1, Phi: 0.05, Theta: 0.8, LMA: 60}

// More leaves than a figure holds go to several, whose names are told, unless --quiet.
func TestFigurePagesAreTold(t *testing.T) {
	file := readings(t, "Quercus rubra", report.MostLeaves+1, oakLeaf)
	for _, quiet := range []bool{false, true} {
		out := filepath.Join(t.TempDir(), "m.svg")
		args := []string{"fit", "leaf", file, "--output", out}
		if quiet {
			args = append(args, "--quiet")
		}
		_, notes := call(t, 0, args...)
		for _, page := range []string{"m-1.svg", "m-2.svg"} {
			if _, err := os.Lstat(filepath.Join(filepath.Dir(out), page)); err != nil {
				t.Error(err)
			}
			if strings.Contains(notes, page) == quiet {
				t.Errorf("quiet %t, %s: %q", quiet, page, notes)
			}
		}
	}
}

// curvesOverCO2 writes the curve of a known leaf over the CO2 within it.
func curvesOverCO2(t *testing.T, species string, b leaf.Biochemistry) string {
	t.Helper()
	var text strings.Builder
	text.WriteString("species,leaf,ci_ppm,net,tleaf,ppfd\n")
	for k, ci := range []float64{60, 80, 100, 150, 200, 260, 330, 450, 600, 800, 1100, 1400} {
		l := leaf.Limits(ci, leaf.Air{PPFD: 1500, Temperature: 25}, leaf.Bernacchi{})
		rate := min(b.Vcmax*l.Rubisco, leaf.Electrons(l.Light, b.Jmax*l.Jmax)*l.Electrons)
		fmt.Fprintf(&text, "%s,a,%g,%.4f,25,1500\n", species, ci, rate-b.Rd+0.05*float64(k%3-1))
	}
	return written(t, "co2.csv", text.String())
}

// pasted is a sound plan with what was printed for a plan under its seedling.
func pasted(t *testing.T, species, block string) string {
	t.Helper()
	sound, err := os.ReadFile("../../testdata/plans/sound.yaml")
	if err != nil {
		t.Fatal(err)
	}
	seedling := "species: " + species + "\n    height: 0.5 m\n"
	if species == "" {
		seedling = "name: own\n    height: 0.3 m\n    leaf_area: 0.031 m2\n    crown_lai: 1.3\n    chi: 1.7\n    mass: {woody: 3.7 g}\n    leaves: evergreen\n" +
			"    respiration: {woody: 3.5}\n    replacement: {leaf_lifespan: 0.5, fine_root_share: 0.2, fine_root_lifespan: 1, construction_cost: 0.6}\n"
	}
	return written(t, "plan.yaml", strings.Replace(string(sound), "{species: Quercus rubra, height: 0.5 m}\n", seedling+block, 1))
}

// printedBlock is the lines of output that are indented as a leaf block.
func printedBlock(out string) string {
	_, after, _ := strings.Cut(out, "    leaf:\n")
	block := ""
	for _, l := range strings.SplitAfter(after, "\n") {
		if !strings.HasPrefix(l, "      ") {
			break
		}
		block += l
	}
	if block == "" {
		return ""
	}
	return "    leaf:\n" + block
}

// What fit leaf prints for a plan is read by a plan without faults, for species with and without a measured shade set, needles, and leaves that the
// library does not know.
func TestPrintedBlocksAreRead(t *testing.T) {
	chemistry := leaf.Biochemistry{Vcmax: 45, Jmax: 80, Rd: 0.8}
	dim := func(file string) string { // the same leaves, grown in deep shade
		text, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		lines := strings.Split(strings.TrimSpace(string(text)), "\n")
		for i := range lines {
			lines[i] += map[bool]string{true: ",growth_light_pct", false: ",4"}[i == 0]
		}
		return written(t, "dim.csv", strings.Join(lines, "\n")+"\n")
	}
	for _, species := range []string{"Quercus rubra", "Picea rubens", "Pinus strobus", ""} {
		light, co2 := readings(t, species, 2, oakLeaf), curvesOverCO2(t, species, chemistry)
		for name, args := range map[string][]string{"light": {light}, "dim": {dim(light)}, "co2": {co2, "--over", "co2"}, "dim co2": {dim(co2), "--over", "co2"}} {
			out, _ := call(t, 0, append([]string{"fit", "leaf"}, args...)...)
			block := printedBlock(out)
			for _, l := range strings.Split(block, "\n") {
				if len(l) > report.Width {
					t.Errorf("%s of %q: wider than %d columns: %s", name, species, report.Width, l)
				}
			}
			if strings.Contains(name, "co2") != strings.Contains(block, "capacities: fixed") {
				t.Errorf("%s of %q: capacities in\n%s", name, species, block)
			}
			if species == "Pinus strobus" && strings.Contains(block, "shade:") != (name == "dim") {
				t.Errorf("%s of %q: which set?\n%s", name, species, block)
			}
			if block == "" {
				t.Errorf("%s of %q prints no block:\n%s", name, species, out)
				continue
			}
			call(t, 0, "check", pasted(t, species, block))
		}
	}
}

// A block that a plan would refuse is not printed: the sentence names the value and what is allowed.
func TestRefusedBlocksAreNotPrinted(t *testing.T) {
	wrongSign := written(t, "sign.csv", "leaf,ppfd,net\na,0,1.2\na,20,1.5\na,50,2.7\na,120,3.7\na,200,5.6\na,300,6.9\na,900,8\n")
	noJmax := curvesOverCO2(t, "Betula alleghaniensis", leaf.Biochemistry{Vcmax: 20, Jmax: 300, Rd: 0.6})
	for _, c := range []struct {
		args  []string
		wants []string
	}{
		{[]string{wrongSign}, []string{"1 leaf of 1 plant", "1 leaf is met better", "-1.21 (-1.80 to -0.63)", "No block for a plan, which refuses sun.rd: -1.21; allowed is 0.001 to 15"}},
		{[]string{noJmax, "--over", "co2"}, []string{"1 leaf of 1 plant", "No block for a plan: these readings do not determine jmax."}},
	} {
		out, _ := call(t, 0, append([]string{"fit", "leaf"}, c.args...)...)
		flat := strings.Join(strings.Fields(out), " ")
		for _, want := range c.wants {
			if !strings.Contains(flat, want) {
				t.Errorf("%v does not say %q:\n%s", c.args, want, out)
			}
		}
		if block := printedBlock(out); block != "" || strings.Contains(out, "NaN") {
			t.Errorf("%v prints a block or NaN:\n%s", c.args, out)
		}
	}
}
