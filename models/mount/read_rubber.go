package mount

import (
	"math"

	"phaselag/data/unit"
)

// rubber reads κ and B of a pressed pad, each from a number or, where the file asks
// for it, from a table of hardness, which becomes an assumption.
func (r *reader) rubber(e entry, keys map[string]entry) (factor, bulk float64) {
	factor = r.number(keys, "compression_coefficient")
	if f, ok := keys["factor"]; ok {
		if _, both := keys["compression_coefficient"]; both {
			r.fault(f.key, f.path, "beside compression_coefficient, which is the same", "state one of the two")
		}
		factor = r.number(keys, "factor")
	}
	bulk = r.amount(keys, "bulk_modulus", unit.Modulus, false)
	used := false
	from := func(key, plain string) (Hard, bool) {
		h, ok := keys[key]
		if !ok {
			return Hard{}, false
		}
		used = true
		for _, other := range []string{plain, "compression_coefficient"} {
			if _, both := keys[other]; both && (other == plain || plain == "factor") {
				r.fault(h.key, h.path, "beside "+other, "state one of the two")
			}
		}
		hard, table, good := r.hardness(h, keys, true)
		if good && math.IsNaN(hard.Factor) {
			t := keys["hardness_table"]
			r.fault(t.value, t.path, string(table)+" knows no factor and no bulk modulus", "use "+string(Lindley)+", or state the numbers")
			return Hard{}, false
		}
		return hard, good
	}
	if h, ok := from("factor_from_hardness", "factor"); ok {
		factor = h.Factor
		r.note("%s: factor %.3g from %s, %s's table (natural rubber, from memory)", e.key.Value, factor, keys["factor_from_hardness"].value.Value, Lindley)
	}
	if h, ok := from("bulk_from_hardness", "bulk_modulus"); ok {
		bulk = h.Bulk
		r.note("%s: bulk modulus %.4g MPa from %s, %s's table (natural rubber, from memory)", e.key.Value, bulk/1e6, keys["bulk_from_hardness"].value.Value, Lindley)
	}
	if t, ok := keys["hardness_table"]; ok && !used {
		r.fault(t.key, t.path, "a table without a hardness", "factor_from_hardness: 60 IRHD, or bulk_from_hardness: 60 IRHD")
	}
	for _, key := range []string{"compression_coefficient", "factor", "factor_from_hardness"} {
		if _, ok := keys[key]; ok && math.IsNaN(factor) {
			factor = 1 // faulty, reported once
		}
	}
	return factor, bulk
}

// hardness looks a hardness up in the table that keys name; Lindley's, if one may be
// left out.
func (r *reader) hardness(h entry, keys map[string]entry, optional bool) (Hard, Table, bool) {
	table := Lindley
	if t, ok := keys["hardness_table"]; ok {
		switch table = Table(r.text(t)); table {
		case Lindley, Gent:
		default:
			r.fault(t.value, t.path, "unknown table "+kind(t.value), "known are "+string(Lindley)+" and "+string(Gent))
			return Hard{}, table, false
		}
	} else if !optional {
		r.fault(h.value, h.path, "without a hardness_table: tables differ by more than a third", "hardness_table: "+string(Lindley)+" (natural rubber), or "+string(Gent))
		return Hard{}, table, false
	}
	x, good := r.quantity(h, unit.Hardness)
	if !good {
		return Hard{}, table, false
	}
	if _, symbol, _ := unit.Split(h.value.Value); table == Lindley {
		if u, ok := unit.Lookup(symbol, unit.Hardness); ok && u.Symbol != "IRHD" {
			r.fault(h.value, h.path, string(Lindley)+"'s table is in IRHD", "from 30 to 80 degrees Shore A and IRHD about agree (common practice, no source): write IRHD if you take them as equal")
			return Hard{}, table, false
		}
	}
	hard, err := table.At(x)
	if err != nil {
		r.fault(h.value, h.path, "outside the table: "+trimmed(err), "state the numbers instead")
		return Hard{}, table, false
	}
	return hard, table, true
}

// ring reads a ring in compression.
func (r *reader) ring(e entry, keys map[string]entry) *Pad {
	p := &Pad{
		Thickness: r.amount(keys, "thickness", unit.Length, false), Length: math.NaN(), Width: math.NaN(),
		Diameter: r.amount(keys, "outer_diameter", unit.Length, false), Inner: r.amount(keys, "inner_diameter", unit.Length, false),
		Pressed: true,
	}
	p.Compression, p.Bulk = r.rubber(e, keys)
	for _, needed := range []string{"inner_diameter", "outer_diameter", "thickness"} {
		if _, ok := keys[needed]; !ok {
			r.fault(e.value, join(e.path, needed), "missing", "for example "+needed+": 20 mm; the thickness is the height of the rubber")
		}
	}
	if p.Inner >= p.Diameter {
		r.fault(keys["outer_diameter"].value, keys["outer_diameter"].path, "must be greater than inner_diameter", "")
	}
	p.Area = math.Pi / 4 * (p.Diameter + p.Inner) * (p.Diameter - p.Inner)
	return p
}

// strip checks a long strip: its width is the short side.
func (r *reader) strip(e entry, keys map[string]entry, p *Pad) {
	switch {
	case math.IsNaN(p.Length) || math.IsNaN(p.Width):
		r.fault(e.value, join(e.path, "width"), "a strip needs length and width", "length: 300 mm, width: 20 mm")
		p.Length, p.Width = 1, 1 // so that press does not report it again
	case p.Width > p.Length:
		r.fault(keys["width"].value, keys["width"].path, "must not be greater than the length", "the width is a strip's short side")
	case p.Length < 5*p.Width:
		r.note("%s: a strip %.3g times as long as wide; the formula is that of a long one", e.key.Value, p.Length/p.Width)
	}
}
