package reports

import (
	"bytes"
	"crypto/sha256"
	"encoding/base64"
	"io"
	"regexp"
	"strings"
	"testing"
	"time"

	"hazewright"
)

func render(t *testing.T, r *hazewright.Result) string {
	t.Helper()
	var b bytes.Buffer
	if err := HTML(&b, r, fixtureProvenance); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

// The policy names the hash of exactly what stands between the tags, and allows
// nothing that has no hash.
func TestSecurityPolicyMatchesContent(t *testing.T) {
	page := render(t, fixture())
	policy := regexp.MustCompile(`http-equiv="Content-Security-Policy" content="([^"]*)"`).FindStringSubmatch(page)
	if policy == nil {
		t.Fatal("no policy")
	}
	got := strings.NewReplacer("&#39;", "'", "&#43;", "+").Replace(policy[1])
	scripts := regexp.MustCompile(`(?s)<script>(.*?)</script>`).FindAllStringSubmatch(page, -1)
	styles := regexp.MustCompile(`(?s)<style>(.*?)</style>`).FindAllStringSubmatch(page, -1)
	if len(scripts) != 2 || len(styles) != 1 {
		t.Fatalf("%d scripts and %d style sheets, want 2 and 1", len(scripts), len(styles))
	}
	for _, part := range append(scripts, styles...) {
		sum := sha256.Sum256([]byte(part[1]))
		if hash := "'sha256-" + base64.StdEncoding.EncodeToString(sum[:]) + "'"; !strings.Contains(got, hash) {
			t.Errorf("the policy %q lacks %s of the part that begins %.40q", got, hash, part[1])
		}
	}
	if !strings.HasPrefix(got, "default-src 'none';") || strings.Contains(got, "unsafe") || strings.Contains(got, "http") {
		t.Errorf("policy %q", got)
	}
	if before, _, _ := strings.Cut(page, "<script>"); strings.Contains(before, ` style="`) {
		t.Error("the page has a style attribute, which the policy forbids")
	}
}

func TestAssetsCanBeInlined(t *testing.T) {
	for name, text := range map[string]string{"echarts": echartsScript, "boot": bootScript, "css": styleSheet} {
		for _, bad := range []string{"</script", "</style", "<!--", "\r"} {
			if strings.Contains(strings.ToLower(text), bad) {
				t.Errorf("%s contains %q", name, bad)
			}
		}
	}
	if !strings.HasPrefix(echartsScript, "/* Apache ECharts 5.6.0, changed") {
		t.Errorf("the chart library begins %.60q, want its banner", echartsScript)
	}
	for _, l := range Licences() {
		if len(l.Text) < 100 {
			t.Errorf("licence of %s is missing", l.Name)
		}
	}
}

// Nothing in the page may load from elsewhere.
func TestReportLoadsNothing(t *testing.T) {
	page := render(t, evilFixture())
	head, _, _ := strings.Cut(page, "<script>") // the library's own texts name XML namespaces
	if m := regexp.MustCompile(`(?i)(?:src|href|action|data)\s*=\s*"?(?:https?:)?//`).FindString(head); m != "" {
		t.Errorf("the page refers to %q", m)
	}
	for _, m := range regexp.MustCompile(`(?i)<(?:link|img|iframe|object|embed|form|base)\b[^>]*>`).FindAllString(head, -1) {
		if m != `<link rel="icon" href="data:,">` {
			t.Errorf("the page has %q", m)
		}
	}
}

func TestReportEscapesNames(t *testing.T) {
	page := render(t, evilFixture())
	for _, raw := range []string{"<img src=x", "</script><img", "\x1b", "\u202e", "<!--<script>"} {
		if strings.Contains(page, raw) {
			t.Errorf("the page contains %q as it is", raw)
		}
	}
	if !strings.Contains(page, "&lt;/script&gt;&lt;img src=x onerror=alert(1)&gt;") {
		t.Error("the name is not shown as text")
	}
	if !strings.Contains(page, `\u003c/script\u003e`) {
		t.Error("the name is not escaped in a chart's data")
	}
}

func TestReportIsDeterministicSmallAndQuick(t *testing.T) {
	first := render(t, fixture())
	if len(first) > 3e6 {
		t.Errorf("the report has %d bytes, want under 3 MB", len(first))
	}
	for range 3 {
		if render(t, fixture()) != first {
			t.Fatal("the same result gives other bytes")
		}
	}
	best := time.Hour
	r := fixture()
	for range 5 {
		start := time.Now()
		if err := HTML(io.Discard, r, fixtureProvenance); err != nil {
			t.Fatal(err)
		}
		best = min(best, time.Since(start))
	}
	if best > 300*time.Millisecond {
		t.Errorf("the report takes %v, want under 300 ms", best)
	}
}

// Every figure has its row with title and definition, and every design its value.
func TestComparisonHasEveryFigure(t *testing.T) {
	page := render(t, fixture())
	for _, def := range hazewright.Figures() {
		row := regexp.MustCompile(`(?s)<tr id="figure-` + def.ID + `">.*?</tr>`).FindString(page)
		if row == "" {
			t.Errorf("%s has no row", def.ID)
			continue
		}
		if n := strings.Count(row, "<td"); n != 5 { // unit, three designs, no programme
			t.Errorf("%s: %d cells, want 5", def.ID, n)
		}
	}
	for _, want := range []string{Scope, "ratio x0.479", "programme note 3, table 2", "Sticking is not given.", "Goal not reached: sublimes",
		"no programme", "Respirable fibres", fixtureProvenance.Command, "3b1f0c9a5d7e2468", "carbon dioxide and water released by the warming",
		"Limits: 3 of 3 FAILED, worst x387."} {
		if !strings.Contains(page, want) {
			t.Errorf("the report lacks %q", want)
		}
	}
	if n := strings.Count(page, `<figure `); n != strings.Count(page, `role="img" aria-label="`) || n < 10 {
		t.Errorf("%d figures, each needs a text alternative", n)
	}
	if strings.Contains(page, "NaN") && strings.Contains(strings.Split(page, "<script>")[0], "NaN") {
		t.Error("the page shows a NaN")
	}
}

func TestEstimatesAreMarked(t *testing.T) {
	page := render(t, fixture())
	for _, id := range []string{"warming", "burden", "burden_low_held"} {
		row := regexp.MustCompile(`(?s)<tr id="figure-` + id + `">.*?</tr>`).FindString(page)
		if n := strings.Count(row, `<span class="est">estimate</span>`); n != 2 { // the third design has no value
			t.Errorf("%s: %d estimate marks, want 2", id, n)
		}
	}
}

// A result without optional parts, as of a study whose goal nothing reaches, still
// gives a report.
func TestReportOfBareResult(t *testing.T) {
	r := fixture()
	for i := range r.Designs {
		d := &r.Designs[i]
		d.Reached, d.Cause, d.Programme, d.Losses, d.Profile, d.Outgoing, d.Curve, d.CurveLow, d.Spectrum, d.FallSpeed, d.Cases, d.Populations =
			false, "never warms", nil, nil, nil, nil, nil, nil, nil, nil, nil, nil
	}
	r.Study.Limits, r.Study.Benchmarks, r.Methods, r.Warnings = nil, nil, nil, nil
	r.Baseline = hazewright.Baseline{}
	page := render(t, r)
	if strings.Contains(page, "<figure") || !strings.Contains(page, "The study sets no limits.") {
		t.Error("charts without data, or no word on limits")
	}
}
