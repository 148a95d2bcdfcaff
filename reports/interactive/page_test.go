package interactive_test

import (
	"bytes"
	"math"
	"regexp"
	"strings"
	"testing"

	"phaselag/data/unit"
	"phaselag/models"
	"phaselag/reports"
	"phaselag/reports/figure/figuretest"
	"phaselag/reports/html"
	"phaselag/reports/interactive"
)

func sheet(t testing.TB, c *models.Compound) (live *html.Live, with, without []byte) {
	t.Helper()
	live, err := interactive.New(c, interactive.Options{OwnStrainNote: reports.OwnStrainNote(c), Frequencies: [2]float64{0.1, 1000}})
	if err != nil {
		t.Fatal(err)
	}
	doc := figuretest.Document()
	if with, err = html.BytesLive(doc, live); err != nil {
		t.Fatal(err)
	}
	if without, err = html.Bytes(doc); err != nil {
		t.Fatal(err)
	}
	return live, with, without
}

// Without its script the page is the static page: the section is hidden, and nothing
// else is changed. Equal input gives equal bytes.
func TestNothingIsLostWithoutScript(t *testing.T) {
	c := invented(t)
	live, with, without := sheet(t, c)
	if _, again, _ := sheet(t, invented(t)); !bytes.Equal(with, again) {
		t.Error("two runs give different bytes")
	}
	if !bytes.Contains(live.Markup, []byte(`<section id="live" class="live" aria-labelledby="live-heading" hidden>`)) {
		t.Error("the section is not hidden")
	}
	s := string(with)
	for _, cut := range []string{string(live.Markup), `<script type="application/json" id="live-data">` + string(live.Data) + "</script>\n", "<script>" + live.Script + "</script>\n", live.Style} {
		if strings.Count(s, cut) != 1 {
			t.Fatalf("%.60q stands %d times in the page", cut, strings.Count(s, cut))
		}
		s = strings.Replace(s, cut, "", 1)
	}
	s = regexp.MustCompile(`; script-src &#39;sha256-[^;]*;[^"]*`).ReplaceAllString(s, "")
	if s != string(without) {
		t.Error("the rest is not the static page")
	}
	if strings.Contains(live.Script, "</script") || strings.Contains(live.Script, "<!--") {
		t.Error("the script ends its element")
	}
	for _, bad := range []string{"http://", "https://", "fetch(", "XMLHttpRequest", "import(", "import ", "eval(", "innerHTML", "@import", "url("} {
		if strings.Contains(strings.ReplaceAll(live.Script+live.Style, `"http://www.w3.org/2000/svg"`, ""), bad) {
			t.Errorf("the script or its style holds %q", bad)
		}
	}
}

// What a compound file says stays data.
func TestNothingSlipsIntoTheScript(t *testing.T) {
	c := *invented(t)
	evil := "</script><script>alert(1)</script><!--\u2028"
	c.Compound.Name, c.Provenance.Assumptions = evil, []string{evil}
	made, err := models.New(c)
	if err != nil {
		t.Fatal(err)
	}
	_, page, _ := sheet(t, made)
	if bytes.Contains(page, []byte("alert(1)</script>")) || bytes.Contains(page, []byte("</script><script>alert")) {
		t.Error("markup of the compound file stands in the page")
	}
}

// driver acts on the page in a frame of a width in CSS pixels and notes what is seen.
const driver = `
const found = { typed: [], read: [], keys: [], widths: [], clipped: [] };
async function frame(width, act, path = "/sheet") {
  const f = document.createElement("iframe");
  f.style = "border:0;width:" + width + "px;height:1200px";
  f.src = path;
  const loaded = new Promise((done) => { f.onload = done; });
  document.body.append(f);
  await loaded;
  act(f.contentDocument, f.contentWindow);
  f.remove();
}
const text = (e) => e.textContent.replace(/\u00a0/g, " ");
function type(d, w, values) {
  for (const [key, value] of Object.entries(values)) {
    const input = d.querySelector('[data-live="' + key + '"]');
    input.value = value;
    input.dispatchEvent(new w.Event("input", { bubbles: true }));
  }
}
function answer(d) {
  const shown = (name) => { const e = d.querySelector('[data-live="' + name + '"]'); return d.defaultView.getComputedStyle(e).display === "none" ? "" : text(e); };
  const rows = [...d.querySelectorAll('[data-live="answer"] tbody tr')];
  return { At: shown("at"), Cells: shown("answer") === "" ? [] : [1, 2].flatMap((k) => rows.map((r) => text(r.cells[k]))), Refusal: shown("refusal"), Note: shown("note"), Invalid: [...d.querySelectorAll('[aria-invalid="true"]')].map((e) => e.dataset.live) };
}
const readout = (d) => text(d.querySelector('[data-live="readout"]'));
const charts = (d) => [...d.querySelectorAll(".live-charts svg")];
function press(d, w, svg, ...keys) {
  for (const key of keys) {
    const event = new w.KeyboardEvent("keydown", { key, bubbles: true, cancelable: true });
    svg.dispatchEvent(event);
    found.keys.push({ Key: key, Read: readout(d), Kept: event.defaultPrevented });
  }
}
// clipped lists labels of charts that reach out of their chart.
function clipped(d, width) {
  for (const svg of charts(d)) {
    const box = svg.getBoundingClientRect();
    for (const e of svg.querySelectorAll("text")) {
      const b = e.getBoundingClientRect();
      if (b.left < box.left - 0.5 || b.right > box.right + 0.5 || b.top < box.top - 0.5 || b.bottom > box.bottom + 0.5) found.clipped.push(width + " px: " + e.textContent);
    }
  }
}
// hover points at a vertex of a curve of a chart.
function hover(d, w, chart, curve, share) {
  const svg = charts(d)[chart], line = svg.querySelector('.curve[data-curve="' + curve + '"]');
  const points = line.getAttribute("points").split(" "), [x, y] = points[Math.round(share * (points.length - 1))].split(",").map(Number);
  const box = svg.getBoundingClientRect(), k = box.width / svg.viewBox.baseVal.width;
  svg.dispatchEvent(new w.PointerEvent("pointermove", { clientX: box.left + x * k, clientY: box.top + y * k, bubbles: true }));
  found.read.push({ Curve: curve, Read: readout(d), Marks: svg.querySelectorAll(".marks circle").length, Thick: [...svg.querySelectorAll(".curve.active")].map((e) => Number(e.dataset.curve)) });
}
`

type seen struct {
	Error string
	Start struct {
		At, Refusal, Note string
		Cells             []string
	}
	Typed []struct {
		At, Refusal, Note string
		Cells, Invalid    []string
	}
	Read []struct {
		Curve int
		Read  string
		Marks int
		Thick []int
	}
	Idle string
	Keys []struct {
		Key, Read string
		Kept      bool
	}
	Taken  []string
	Curves map[string]int
	Tab    []string
	Widths []struct{ Width, Scroll int }

	Clipped     []string
	Hidden      string
	StaticShown int
	StaticAll   int
	Resources   []string
	Labels      []string
}

// The page as a reader uses it: typing, pointing, switching, by keyboard alone, on
// paper, on a narrow screen; and nothing is fetched.
func TestPage(t *testing.T) {
	c := invented(t)
	_, with, _ := sheet(t, c)
	typed := []struct{ frequency, temperature, strain string }{
		{"12 Hz", "-20 °C", ""}, {"12 Hz", "-20 °C", "0.15 %"}, {"80 rad/s", "68 °F", "1.2 %"}, {"12 Hz", "300 K", "0.05 m/m"},
		{"12 Hz", "95 °C", ""}, {"12 Hz", "-30 °C", "5 %"}, {"1e9 Hz", "23 °C", "50 %"}, {"-1 Hz", "23 °C", ""}, {"12", "23 °C", ""}, {"12 Hz", "23 N", ""}, {"12 Hz", "23 °C", "1,5 %"},
	}
	var list []map[string]string
	for _, v := range typed {
		list = append(list, map[string]string{"frequency": v.frequency, "temperature": v.temperature, "strain": v.strain})
	}
	s := &site{pages: map[string]string{"/sheet": string(with), "/": page(driver, "const typed = "+asJSON(t, list)+`;
(async () => {
  await frame(1000, (d, w) => {
    found.start = answer(d);
    found.idle = readout(d);
    found.labels = [...d.querySelectorAll('[data-live="temperatures"] label')].map(text);
    for (const values of typed) { type(d, w, values); found.typed.push(answer(d)); }
    type(d, w, { frequency: "10 Hz", temperature: "23 °C", strain: "" });
    hover(d, w, 0, 2, 0.5);
    hover(d, w, 1, 0, 0);
    hover(d, w, 2, 4, 1);
    hover(d, w, 3, 1, 0.3);
    charts(d)[3].dispatchEvent(new w.PointerEvent("pointerleave"));
    found.left = readout(d);

    const count = () => charts(d)[0].querySelectorAll(".curve").length, boxes = [...d.querySelectorAll('[data-live="temperatures"] input')];
    found.curves = { all: count() };
    boxes[1].click();
    found.curves.one = count();
    d.querySelector('[data-live="none"]').click();
    found.curves.none = count();
    boxes[2].click();
    found.curves.single = count();
    d.querySelector('[data-live="all"]').click();
    found.curves.again = count();

    const svg = charts(d)[1];
    svg.focus();
    found.keys.push({ Key: "focus", Read: readout(d), Kept: true });
    press(d, w, svg, "ArrowRight", "ArrowRight", "ArrowLeft", "ArrowUp", "ArrowDown", "ArrowDown", "PageUp", "PageDown", "Home", "End", "End", "a", "Enter");
    found.taken = ["frequency", "temperature", "strain"].map((k) => d.querySelector('[data-live="' + k + '"]').value).concat(answer(d).Cells);
    press(d, w, svg, "Escape");

    type(d, w, { frequency: "10 Hz" });
    d.querySelector('input[value="strain"]').click();
    found.curves.strain = count();
    svg.focus();
    press(d, w, svg, "Home", "End", "ArrowLeft");
    found.tab = [...d.querySelectorAll("#live input, #live button, #live [tabindex]")].filter((e) => e.tabIndex >= 0).map((e) => e.dataset.live || e.name || e.type || e.tagName);
    found.resources = w.performance.getEntriesByType("resource").map((e) => e.name);
    clipped(d, 1000);

    // on paper: the rules for print, taken for every medium
    for (const sheet of d.styleSheets) for (const rule of sheet.cssRules) if (rule.media && rule.media.mediaText === "print") rule.media.mediaText = "all";
    const style = (e) => w.getComputedStyle(e).display;
    found.hidden = style(d.getElementById("live"));
    const all = [...d.querySelectorAll("main > *, main section > *")].filter((e) => !e.closest("#live") && !["SCRIPT", "NAV"].includes(e.tagName));
    found.staticAll = all.length;
    found.staticShown = all.filter((e) => e.getBoundingClientRect().height > 0).length;
  });
  for (const width of [380, 800, 1280]) {
    await frame(width, (d, w) => {
      hover(d, w, 0, 0, 1);
      hover(d, w, 0, 5, 0);
      hover(d, w, 0, 5, 1);
      found.read.length -= 3;
      found.widths.push({ Width: width, Scroll: d.documentElement.scrollWidth });
      clipped(d, width);
    });
  }
  out(found);
})().catch((e) => out({ error: String(e.stack || e) }));
`)}}
	var got seen
	run(t, s, &got, "--virtual-time-budget=20000")
	if got.Error != "" {
		t.Fatal(got.Error)
	}
	same := func(what string, q models.Condition, cells []string, words string) {
		t.Helper()
		wantCells, wantWords := expected(t, c, q)
		if strings.Join(cells, " ") != strings.Join(wantCells, " ") || words != wantWords {
			t.Errorf("%s: the page has %q %q, the command %q %q", what, cells, words, wantCells, wantWords)
		}
	}
	kelvin := unit.Kelvin
	same("start", models.Condition{Frequency: 10, Temperature: kelvin(23), Strain: math.NaN()}, got.Start.Cells, got.Start.Refusal)
	if got.Start.Note != reports.OwnStrainNote(c) || got.Start.At != "At 10 Hz, 23 °C, 0.2 %:" {
		t.Errorf("the page begins with %q, %q", got.Start.At, got.Start.Note)
	}
	for i, v := range typed {
		g := got.Typed[i]
		q := models.Condition{Strain: math.NaN()}
		var err error
		invalid := ""
		read := func(name, s string, k unit.Quantity, x *float64) {
			if err == nil && s != "" {
				if *x, err = unit.Parse(s, k); err != nil {
					invalid = name
				}
			}
		}
		read("frequency", v.frequency, unit.Frequency, &q.Frequency)
		read("temperature", v.temperature, unit.Temperature, &q.Temperature)
		read("strain", v.strain, unit.Strain, &q.Strain)
		if strings.Join(g.Invalid, " ") != invalid {
			t.Errorf("%+v: the field %q is marked, not %q", v, g.Invalid, invalid)
		}
		if err != nil {
			if g.Refusal == "" || len(g.Cells) != 0 {
				t.Errorf("%+v: the page answers %q", v, g)
			}
			continue
		}
		same(v.frequency+", "+v.temperature+", "+v.strain, q, g.Cells, g.Refusal)
		if g.Refusal == "" && (g.Note != "") != (v.strain == "") {
			t.Errorf("%+v: the note on strain is %q", v, g.Note)
		}
	}
	reading := func(text string) {
		t.Helper()
		q, cells := parseReading(t, text)
		if cells == nil {
			return
		}
		want, words := expected(t, c, q)
		if strings.Join(cells, " ") != strings.Join(want, " ") {
			t.Errorf("%q: the command prints %q %s", text, want, words)
		}
	}
	for _, r := range got.Read {
		reading(r.Read)
		if want := got.Labels[r.Curve]; !strings.Contains(r.Read, want+",") {
			t.Errorf("the curve of %s was read as %q", want, r.Read)
		}
		if r.Marks != 1 || len(r.Thick) != 1 || r.Thick[0] != r.Curve {
			t.Errorf("%d marks, curves %v marked for curve %d", r.Marks, r.Thick, r.Curve)
		}
	}
	checkKeys(t, &got, reading)
	n := len(got.Labels)
	if n < 5 || got.Curves["all"] != n || got.Curves["one"] != n-1 || got.Curves["none"] != 0 || got.Curves["single"] != 1 || got.Curves["again"] != n || got.Curves["strain"] != n {
		t.Errorf("%d temperatures, curves %v", n, got.Curves)
	}
	for _, w := range got.Widths {
		if w.Scroll > w.Width {
			t.Errorf("a screen of %d px scrolls over %d px", w.Width, w.Scroll)
		}
	}
	if len(got.Widths) != 3 || len(got.Clipped) > 0 {
		t.Errorf("clipped labels: %q", got.Clipped)
	}
	if got.Hidden != "none" || got.StaticAll < 10 || got.StaticShown != got.StaticAll {
		t.Errorf("on paper the controls are %q and %d of %d static parts are seen", got.Hidden, got.StaticShown, got.StaticAll)
	}
	for _, path := range s.asked {
		if path != "/" && path != "/sheet" {
			t.Errorf("the page asked for %s", path)
		}
	}
	if len(s.asked) != 5 || len(got.Resources) > 0 {
		t.Errorf("asked for %q, fetched %q", s.asked, got.Resources)
	}
}

// checkKeys: the arrow keys go along a curve and between curves, and nothing needs a
// pointer.
func checkKeys(t *testing.T, got *seen, reading func(string)) {
	t.Helper()
	at := func(i int) models.Condition {
		q, _ := parseReading(t, got.Keys[i].Read)
		return q
	}
	index := map[string]int{}
	for i, k := range got.Keys {
		if k.Key == "Escape" {
			if k.Read != got.Idle {
				t.Errorf("after Escape: %q", k.Read)
			}
			index[k.Key] = i
			continue
		}
		reading(k.Read)
		if k.Kept != (k.Key != "a") {
			t.Errorf("key %s: default prevented is %v", k.Key, k.Kept)
		}
	}
	// focus, Right, Right, Left, Up, Down, Down, PageUp, PageDown, Home, End, End, a, Enter
	for _, v := range []struct {
		i     int
		right bool
	}{{1, true}, {2, true}, {3, false}, {7, true}, {8, false}, {9, false}, {10, true}} {
		if f, before := at(v.i).Frequency, at(v.i-1).Frequency; (f > before) != v.right || f == before || at(v.i).Temperature != at(v.i-1).Temperature {
			t.Errorf("key %s: from %g to %g Hz", got.Keys[v.i].Key, before, f)
		}
	}
	if at(1) != at(3) || at(4).Temperature <= at(3).Temperature || at(5) != at(3) || at(6).Temperature >= at(5).Temperature || at(4).Frequency != at(3).Frequency || at(11) != at(10) || at(13) != at(10) {
		t.Errorf("keys: %+v", got.Keys)
	}
	// Enter typed the condition that was read, and the answer is that of the readout.
	_, cells := parseReading(t, got.Keys[13].Read)
	if len(got.Taken) != 11 || strings.Join(cells, " ") != strings.Join(got.Taken[3:], " ") || got.Taken[2] != "" {
		t.Errorf("Enter: %q of %q", got.Taken, got.Keys[13].Read)
	}
	i := index["Escape"]
	if lo, hi, step := at(i+1), at(i+2), at(i+3); !(lo.Strain < step.Strain && step.Strain < hi.Strain) || lo.Frequency != hi.Frequency {
		t.Errorf("strain: %+v", got.Keys[i:])
	}
	want := "frequency temperature strain live-mode live-mode"
	if tab := strings.Join(got.Tab, " "); !strings.HasPrefix(tab, want) || strings.Count(tab, "checkbox") != len(got.Labels) || !strings.HasSuffix(tab, "all none svg svg svg svg") {
		t.Errorf("the Tab key goes to %q", got.Tab)
	}
}

var readingForm = regexp.MustCompile(`^(\S+ Hz), (\S+ °C), (\S+ %): G′ (\S+) ± (\S+) MPa; G″ (\S+) ± (\S+) MPa; \|G\*\| (\S+) ± (\S+) MPa; tan δ (\S+) ± (\S+)$`)

// parseReading takes a line of the readout apart: the condition, the values and the
// half-widths.
func parseReading(t *testing.T, text string) (models.Condition, []string) {
	t.Helper()
	m := readingForm.FindStringSubmatch(text)
	if m == nil {
		t.Errorf("%q is no reading", text)
		return models.Condition{}, nil
	}
	q := models.Condition{}
	for i, v := range []struct {
		kind unit.Quantity
		x    *float64
	}{{unit.Frequency, &q.Frequency}, {unit.Temperature, &q.Temperature}, {unit.Strain, &q.Strain}} {
		var err error
		if *v.x, err = unit.Parse(m[i+1], v.kind); err != nil {
			t.Error(err)
		}
	}
	return q, []string{m[4], m[6], m[8], m[10], m[5], m[7], m[9], m[11]}
}
