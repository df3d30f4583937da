package reports

import (
	"bytes"
	"context"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"
	"math"
	"regexp"
	"strings"
	"testing"

	"hazewright"
)

const spectrumStudy = `
study: Basin <trial> & co
world: mars
goal: {warming: 10 K}
designs:
  - name: Mixed <b>rods</b>
    particles:
      - {shape: rod, length: 8 um, diameter: 80 nm, material: iron, spread: 1.2, oxide: 3 nm, share: 50 %}
      - {shape: rod, length: 13 um, diameter: 100 nm, material: aluminium, share: 30 %, surface_scattering: false}
      - {shape: sphere, radius: 2 um, material: water-ice, share: 20 %}
`

// spectrumOf works out a spectrum of so many wavelengths, 0.3 um to 60 um.
func spectrumOf(t *testing.T, study string, points int) *hazewright.Spectrum {
	t.Helper()
	s, err := hazewright.Load(hazewright.Source{Name: "basin.yaml", Data: []byte(study)}, nil)
	if err != nil {
		t.Fatal(err)
	}
	wavelengths := make([]float64, points)
	for i := range wavelengths {
		wavelengths[i] = 0.3e-6 * math.Pow(200, float64(i)/float64(max(points-1, 1)))
	}
	out, err := hazewright.NewEngine(hazewright.Options{}).Spectrum(context.Background(), s, "", wavelengths)
	if err != nil {
		t.Fatal(err)
	}
	return out
}

func spectrumPageText(t *testing.T, s *hazewright.Spectrum) string {
	t.Helper()
	var b bytes.Buffer
	if err := SpectrumHTML(&b, s, fixtureProvenance); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

// The document has exactly these keys, and the numbers of the rows.
func TestSpectrumJSON(t *testing.T) {
	s := spectrumOf(t, spectrumStudy, 3)
	var b bytes.Buffer
	if err := SpectrumJSON(&b, s, Provenance{Version: "9.9.9"}); err != nil {
		t.Fatal(err)
	}
	var doc map[string]json.RawMessage
	if err := json.Unmarshal(b.Bytes(), &doc); err != nil {
		t.Fatal(err)
	}
	var rows []map[string]any
	if err := json.Unmarshal(doc["rows"], &rows); err != nil {
		t.Fatal(err)
	}
	if len(doc) != 4 || string(doc["tool"]) != `"hazewright"` || string(doc["version"]) != `"9.9.9"` || string(doc["design"]) != `"Mixed <b>rods</b>"` {
		t.Errorf("the document is %.200s", b.String())
	}
	if len(rows) != 9 {
		t.Fatalf("%d rows, want 3 wavelengths of 3 populations", len(rows))
	}
	k := 0
	for _, p := range s.Populations {
		for _, r := range p.Rows {
			want := map[string]any{"population": p.Name, "wavelength": r.Wavelength, "c_ext": r.Ext, "c_sca": r.Sca, "c_abs": r.Abs, "g": r.G,
				"kappa_ext": r.KappaExt, "kappa_abs": r.KappaAbs, "method": r.Method, "error": r.Err}
			if len(rows[k]) != len(want) {
				t.Errorf("row %d has %d keys, want %d", k, len(rows[k]), len(want))
			}
			for key, v := range want {
				if rows[k][key] != v {
					t.Errorf("row %d: %s is %v, want %v", k, key, rows[k][key], v)
				}
			}
			k++
		}
	}
}

func TestSpectrumCSV(t *testing.T) {
	s := spectrumOf(t, spectrumStudy, 3)
	data, err := SpectrumCSV(s)
	if err != nil {
		t.Fatal(err)
	}
	lines, err := csv.NewReader(bytes.NewReader(data)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	head := "design,population,wavelength [m],c_ext [m2],c_sca [m2],c_abs [m2],g [1],kappa_ext [m2/kg],kappa_abs [m2/kg],method,error [1]"
	if got := strings.Join(lines[0], ","); got != head || len(lines) != 10 {
		t.Fatalf("%d lines, head %q", len(lines), got)
	}
	r := s.Populations[2].Rows[1]
	want := []string{s.Design, "sphere of radius 2 um, water-ice", number(r.Wavelength), number(r.Ext), number(r.Sca), number(r.Abs), number(r.G),
		number(r.KappaExt), number(r.KappaAbs), r.Method, number(r.Err)}
	if got := lines[8]; strings.Join(got, "|") != strings.Join(want, "|") {
		t.Errorf("row is %q, want %q", got, want)
	}
}

// The table has a head for each population, its lines aligned under their units, and the numbers in
// micrometres.
func TestSpectrumTable(t *testing.T) {
	s := spectrumOf(t, spectrumStudy, 3)
	var b bytes.Buffer
	if err := SpectrumTable(&b, s, Style{}); err != nil {
		t.Fatal(err)
	}
	text := b.String()
	for _, want := range []string{
		"Design Mixed <b>rods</b>.",
		"rod 8 um x 80 nm, iron: material iron, 7874 kg/m3; mean mass of one 3.219e-16 kg; 9 size nodes, length 3.514 um to 18.21 um (spread 1.2)",
		"  oxide skin 3 nm, as the study gives it",
		"  surface scattering of electrons adds 0.75 x 4e-16 ohm m2 / 74 nm = 4.054e-9 ohm m",
		"  surface scattering of electrons is off, as the study says",
		"the material's own, an assumption",
		"  surface scattering of electrons does not act on full spheres",
		"1 size node, all of one radius",
	} {
		if !strings.Contains(text, want) {
			t.Errorf("the table lacks %q:\n%s", want, text)
		}
	}
	if n := strings.Count(text, "\nwavelength "); n != 3 {
		t.Errorf("%d heads of columns, want 3", n)
	}
	r := s.Populations[2].Rows[2]
	want := regexp.MustCompile(fmt.Sprintf(`\n +60 +%s +%s +%s .* Mie series +1e-7\n`, significant(r.Ext*1e12, 5), significant(r.Sca*1e12, 5), significant(r.Abs*1e12, 5)))
	if !want.MatchString(text) {
		t.Errorf("no line like %s:\n%s", want, text)
	}
	for _, block := range strings.Split(text, "\nwavelength ")[1:] {
		lines := strings.Split(block, "\n")
		for _, line := range lines[1:5] { // units and three rows end where the heads end
			if len(line) != len("wavelength ")+len(lines[0]) {
				t.Errorf("a line of %d characters under heads of %d: %q", len(line), len("wavelength ")+len(lines[0]), line)
			}
		}
	}
}

func TestSpectrumRefusesWhatIsNotANumber(t *testing.T) {
	s := spectrumOf(t, spectrumStudy, 2)
	s.Populations[1].Rows[0].KappaAbs = math.NaN()
	_, errCSV := SpectrumCSV(s)
	for name, err := range map[string]error{
		"table": SpectrumTable(io.Discard, s, Style{}), "JSON": SpectrumJSON(io.Discard, s, Provenance{}),
		"page": SpectrumHTML(io.Discard, s, Provenance{}), "CSV": errCSV,
	} {
		if err == nil || !strings.Contains(err.Error(), "spectrum of rod 13 um") {
			t.Errorf("%s: got %v, want an error that names the place", name, err)
		}
	}
	if err := SpectrumJSON(io.Discard, nil, Provenance{}); err == nil {
		t.Error("no spectrum is written without an error")
	}
}

func TestSpectrumPage(t *testing.T) {
	s := spectrumOf(t, spectrumStudy, 60)
	page := spectrumPageText(t, s)
	for _, want := range []string{
		"0.75 x 4", "as the study gives it", "surface scattering of electrons is off", "Oxide skin as used", "Surface scattering as used",
		"one-mode yardstick λ²/(8π) per particle mass, rod 8 µm x 80 nm, iron", "sunlight, shape", "emission of the ground at",
		"Mie series", "axial-current solver", "Median error [%]", fixtureProvenance.Command, "Basin &lt;trial&gt; &amp; co", "default-src &#39;none&#39;",
	} {
		if !strings.Contains(page, want) {
			t.Errorf("the page lacks %q", want)
		}
	}
	if strings.Contains(page, "<b>rods") || strings.Contains(page, "per particle mass, sphere") {
		t.Error("a name became markup, or a sphere has the yardstick of rods")
	}
	if n := strings.Count(page, "<td>Mie series</td>"); n != 61 { // the table behind the chart, and one run of methods
		t.Errorf("%d cells name the Mie series, want 61", n)
	}
	if page != spectrumPageText(t, s) {
		t.Error("the same spectrum gives other bytes")
	}
}

// A table behind a chart of very many wavelengths is thinned, and says so; a single
// wavelength still makes a chart.
func TestSpectrumPageOfManyAndOfOne(t *testing.T) {
	const ice = "study: Ice\nworld: mars\ngoal: {burden: 1 mg/m2}\ndesigns: [{name: Ice, particles: [{shape: sphere, radius: 2 um, material: water-ice}]}]\n"
	many := spectrumOf(t, ice, 5000)
	c, err := kappaChart(many)
	if err != nil {
		t.Fatal(err)
	}
	if n := len(c.Table.Rows); n < shownRows/2 || n > shownRows+1 || !strings.Contains(c.Table.Note, "One wavelength in 9") {
		t.Errorf("%d rows, note %q", n, c.Table.Note)
	}
	if n := strings.Count(string(c.Option), "],["); n < 9990 {
		t.Errorf("%d points drawn, want all 10000", n)
	}
	if c, err := kappaChart(spectrumOf(t, ice, 1)); err != nil || c == nil || !strings.Contains(string(c.Option), `"min":0.15,`) {
		t.Errorf("one wavelength: chart %v, error %v", c, err)
	}
}

func TestSpectrumPageInBrowser(t *testing.T) {
	s := spectrumOf(t, spectrumStudy, 200)
	b := openTab(t)
	b.openPage(func(w io.Writer) error { return SpectrumHTML(w, s, fixtureProvenance) })
	b.drawn(1)
	b.shoot("spectrum.png", 1200, 2600)
	if got := evaluate[string](b, `document.querySelector("h1").textContent`); got != "Mixed <b>rods</b>" {
		t.Errorf("the heading is %q, want the name as text", got)
	}
	if overflow := b.narrow(); overflow != "" {
		t.Errorf("390 px wide: %s", overflow)
	}
	b.shoot("spectrum-narrow.png", 390, 4000)
	b.wide()
	b.wait()

	// A tooltip names wavelength and quantity, with units.
	evaluate[bool](b, `(() => { const chart = document.querySelector("#chart-kappa"); chart.scrollIntoView({block: "center", behavior: "instant"});
		const box = chart.getBoundingClientRect();
		chart.querySelector("svg").parentNode.dispatchEvent(new MouseEvent("mousemove", {clientX: box.left + 500, clientY: box.top + 150, bubbles: true}));
		return true; })()`)
	b.wait()
	if got := evaluate[string](b, `document.querySelector("#chart-kappa svg").textContent`); !strings.Contains(got, "Wavelength [µm]: ") || !strings.Contains(got, "absorption, rod 13 µm") {
		t.Errorf("no tooltip in the chart: %q", got)
	}
	b.dark()
	b.drawn(1)
	if got := evaluate[string](b, `document.querySelector("#chart-kappa svg").innerHTML.includes("#56B4E9") ? "dark" : "light"`); got != "dark" {
		t.Errorf("the chart is %s", got)
	}
	b.shoot("spectrum-dark.png", 1200, 2600)
	b.print("spectrum.pdf")
	b.drawn(1)
	b.quiet()
}
