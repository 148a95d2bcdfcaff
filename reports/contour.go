package reports

import "math"

// Contours by marching squares: in each cell of the grid the border of {z ≥ level}
// joins the places on the cell's sides where z, taken as linear between two corners,
// passes the level. Going round a cell anticlockwise the border runs from where the
// region is left to where it is entered, with the region at its left; in a cell with two
// opposite corners inside, the mean of all four says whether these hang together. The
// pieces are chained into closed rings; round the grid lies a rim of cells without
// width, below every level, so that rings close along the border. Holes run the other way
// round. (Common practice, no source.)

// contour is the border of a region: a ring, and its open lines, which leave out what
// lies on the border of the grid.
type contour struct {
	x, y  []float64
	lines [][2][]float64
}

// contours returns the rings of {z ≥ level} for z[i][j] at (xs[i], ys[j]), in the order in
// which a scan of the rows meets them. All numbers must be finite.
func contours(xs, ys []float64, z [][]float64, level float64) []contour {
	nx, ny := len(xs)+2, len(ys)+2
	clamp := func(i, n int) int { return max(0, min(n-3, i-1)) }
	px := func(i int) float64 { return xs[clamp(i, nx)] }
	py := func(j int) float64 { return ys[clamp(j, ny)] }
	value := func(i, j int) float64 {
		if i == 0 || j == 0 || i == nx-1 || j == ny-1 {
			return math.Inf(-1)
		}
		return z[i-1][j-1]
	}
	type piece struct {
		from, to int // sides
		rim      bool
		used     bool
	}
	// Side 2k is that from node k to its right neighbour, 2k+1 that upwards.
	node := func(i, j int) int { return j*nx + i }
	var pieces []piece
	start := map[int]int{}
	for j := range ny - 1 {
		for i := range nx - 1 {
			corners := [4][2]int{{i, j}, {i + 1, j}, {i + 1, j + 1}, {i, j + 1}}
			sides := [4]int{2 * node(i, j), 2*node(i+1, j) + 1, 2 * node(i, j+1), 2*node(i, j) + 1}
			var in [4]bool
			sum := 0.0
			for k, c := range corners {
				v := value(c[0], c[1])
				in[k] = v >= level
				sum += v
			}
			var leave, enter []int
			for k := range 4 {
				next := in[(k+1)%4]
				switch {
				case in[k] && !next:
					leave = append(leave, k)
				case !in[k] && next:
					enter = append(enter, k)
				}
			}
			rim := i == 0 || j == 0 || i == nx-2 || j == ny-2
			for _, l := range leave {
				e := enter[0]
				if len(enter) == 2 {
					// The entrance of the same corner comes just before it is left.
					own, other := enter[0], enter[1]
					if (l+3)%4 == enter[1] {
						own, other = other, own
					}
					e = own
					if sum >= 4*level {
						e = other
					}
				}
				start[sides[l]] = len(pieces)
				pieces = append(pieces, piece{from: sides[l], to: sides[e], rim: rim})
			}
		}
	}
	place := func(side int) (x, y float64) {
		k := side / 2
		i, j := k%nx, k/nx
		i1, j1 := i+1, j
		if side%2 == 1 {
			i1, j1 = i, j+1
		}
		a, b := value(i, j), value(i1, j1)
		t := (level - a) / (b - a)
		if math.IsInf(a, 0) || math.IsInf(b, 0) {
			t = 0 // both ends lie on the border
		}
		return px(i) + t*(px(i1)-px(i)), py(j) + t*(py(j1)-py(j))
	}
	var out []contour
	for first := range pieces {
		if pieces[first].used {
			continue
		}
		var c contour
		var rims []bool
		for k := first; !pieces[k].used; k = start[pieces[k].to] {
			pieces[k].used = true
			x, y := place(pieces[k].from)
			c.x, c.y = append(c.x, x), append(c.y, y)
			rims = append(rims, pieces[k].rim)
		}
		c.lines = openLines(c.x, c.y, rims)
		out = append(out, c)
	}
	return out
}

// openLines are the stretches of a ring whose pieces, from point k to the next, lie not
// on the border.
func openLines(x, y []float64, rim []bool) [][2][]float64 {
	n := len(x)
	first := -1
	for k := range n {
		if rim[k] && !rim[(k+1)%n] {
			first = (k + 1) % n
			break
		}
	}
	if first < 0 {
		if n == 0 || rim[0] {
			return nil
		}
		return [][2][]float64{{append(append([]float64{}, x...), x[0]), append(append([]float64{}, y...), y[0])}}
	}
	var out [][2][]float64
	var lx, ly []float64
	for s := range n {
		k := (first + s) % n
		if rim[k] {
			if lx != nil {
				out = append(out, [2][]float64{lx, ly})
				lx, ly = nil, nil
			}
			continue
		}
		if lx == nil {
			lx, ly = []float64{x[k]}, []float64{y[k]}
		}
		lx, ly = append(lx, x[(k+1)%n]), append(ly, y[(k+1)%n])
	}
	if lx != nil {
		out = append(out, [2][]float64{lx, ly})
	}
	return out
}

// mapLevels are round numbers between lo and hi, at most 11 and at least 4 where that is possible:
// equal steps, or where hi is more than six times lo equal shares of a decade.
func mapLevels(lo, hi float64) []float64 {
	if !(hi > lo) {
		return nil
	}
	const most = 11
	if lo > 0 && hi/lo > 6 {
		for _, set := range [][]float64{{1, 1.5, 2, 3, 4, 5, 6, 8}, {1, 1.5, 2, 3, 5, 7}, {1, 2, 5}, {1, 3}, {1}} {
			var out []float64
			for k := math.Floor(math.Log10(lo)); k <= math.Ceil(math.Log10(hi)); k++ {
				for _, m := range set {
					if v := m * math.Pow(10, k); v > lo && v < hi {
						out = append(out, v)
					}
				}
			}
			if len(out) <= most {
				return out
			}
		}
	}
	for power := math.Floor(math.Log10((hi - lo) / most)); ; power++ {
		for _, m := range []float64{1, 2, 5} {
			step := m * math.Pow(10, power)
			first, last := math.Floor(lo/step)+1, math.Ceil(hi/step)-1
			if last-first+1 > most {
				continue
			}
			var out []float64
			for k := first; k <= last; k++ {
				out = append(out, roundTo(k*step, 6))
			}
			return out
		}
	}
}
