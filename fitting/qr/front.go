package qr

// Factorization of a tall matrix whose rows come in blocks that touch few columns
//
// The rows of an isotherm know its own temperature offset and what all share,
// and nothing of the offsets of others. With the blocks in order, a column is
// active from its first to its last block. After its last block it is
// eliminated by one reflector over the rows that can be nonzero in it, which gives
// its row of R, and the remaining rows go on without it (the frontal method; Duff
// and Reid, ACM Trans. Math. Softw. 9 (1983) 302; citation from memory). Rows that
// have gathered are compressed to a triangle on the way, so that the work is
// linear in the number of rows and the memory does not depend on it.
//
// Rows are filled from the bottom of the buffer upwards: the latest block is on
// top, and a column that began late is zero below.

// Front takes the blocks. Make one with NewFront.
type Front struct {
	// Rows are the rows of R in the order of elimination, complete after Finish.
	// Columns without any element have none.
	Rows []FrontRow
	// Rest is the norm of what no column explains of the right-hand side.
	Rest float64

	n       int
	last    []int
	block   int
	slot    []int // by column; −1: not active
	columns []int // by slot
	end     []int // by slot: rows top to end may be nonzero
	buf     []float64
	ld, top int
	tau     []float64
	// Storage of the rows.
	indices  []int
	elements []float64
	rowStart int
}

// FrontRow is a row of R: the column that it eliminated and all columns with
// their elements, the eliminated one first. Column n is the right-hand side.
type FrontRow struct {
	Columns  []int
	Elements []float64
}

// NewFront prepares for a matrix of n columns and a right-hand side, which is
// column n. last holds for every column the number, from 0, of the last block
// that touches it; columns that stay to the end have a number that no block has.
func NewFront(n int, last []int) *Front {
	f := new(Front)
	f.Reset(n, last)
	return f
}

// Reset prepares for another matrix and keeps the workspace; the rows of the
// last one are overwritten.
func (f *Front) Reset(n int, last []int) {
	if len(last) != n {
		panic("qr: length of last is not n")
	}
	f.n, f.last, f.block, f.Rest = n, last, 0, 0
	f.Rows, f.columns, f.end = f.Rows[:0], f.columns[:0], f.end[:0]
	f.indices, f.elements = f.indices[:0], f.elements[:0]
	f.slot = append(f.slot[:0], make([]int, n+1)...)
	for c := range f.slot {
		f.slot[c] = -1
	}
	f.buf, f.top = f.buf[:0], f.ld
}

// row starts a row of R; its elements are put behind it.
func (f *Front) row(c int, v float64) {
	f.Rows = append(f.Rows, FrontRow{})
	f.rowStart = len(f.indices)
	f.put(c, v)
}

func (f *Front) put(c int, v float64) {
	f.indices, f.elements = append(f.indices, c), append(f.elements, v)
	r := &f.Rows[len(f.Rows)-1]
	r.Columns, r.Elements = f.indices[f.rowStart:], f.elements[f.rowStart:]
}

// gather is how many rows for each active column are gathered before they are
// compressed.
const gather = 4

// Add appends a block of m rows: a is m×len(columns), column-major, with
// leading dimension m, and is not changed. It eliminates the columns that the
// block was the last of.
func (f *Front) Add(columns []int, a []float64, m int) {
	if m > 0 {
		checkShape(a, m, len(columns), m)
		f.room(m, len(columns))
		f.top -= m
		for i, c := range columns {
			s := f.slot[c]
			if s < 0 {
				s = f.open(c)
			}
			copy(f.column(s)[f.top:], a[i*m:(i+1)*m])
			f.end[s] = max(f.end[s], f.top+m)
		}
	}
	for _, c := range columns {
		if c < f.n && f.last[c] == f.block && f.slot[c] >= 0 {
			f.eliminate(c)
		}
	}
	f.block++
	if rows := f.ld - f.top; rows > gather*len(f.columns) && rows > 64 {
		f.compress()
	}
}

func (f *Front) column(slot int) []float64 { return f.buf[slot*f.ld : (slot+1)*f.ld] }

// room makes place for m more rows.
func (f *Front) room(m, columns int) {
	if f.top >= m {
		return
	}
	old, oldLd, oldTop := f.buf, f.ld, f.top
	rows := oldLd - oldTop
	// A new array: the old one is still read.
	f.ld = rows + m + gather*(len(f.columns)+columns)
	f.top = f.ld - rows
	f.buf = make([]float64, f.ld*len(f.columns))
	for s := range f.columns {
		copy(f.column(s)[f.top:], old[s*oldLd+oldTop:(s+1)*oldLd])
		f.end[s] += f.top - oldTop
	}
}

// open makes a column active.
func (f *Front) open(c int) int {
	s := len(f.columns)
	f.slot[c] = s
	f.columns = append(f.columns, c)
	f.end = append(f.end, f.top)
	if n := (s + 1) * f.ld; n <= cap(f.buf) {
		f.buf = f.buf[:n]
		clear(f.column(s))
	} else {
		f.buf = append(f.buf, make([]float64, f.ld)...)
	}
	return s
}

// eliminate takes a column out of the front.
func (f *Front) eliminate(c int) {
	s := f.slot[c]
	end := f.end[s]
	v := f.column(s)[f.top:end]
	if Norm(v) != 0 {
		tau := Reflector(v)
		f.row(c, v[0])
		for t, d := range f.columns {
			if t == s {
				continue
			}
			w := f.column(t)
			Apply(v, tau, w[f.top:end])
			f.end[t] = max(f.end[t], end)
			if w[f.top] != 0 {
				f.put(d, w[f.top])
				w[f.top] = 0
			}
		}
		f.top++
	}
	last := len(f.columns) - 1
	if s != last {
		copy(f.column(s), f.column(last))
		f.end[s], f.columns[s] = f.end[last], f.columns[last]
		f.slot[f.columns[s]] = s
	}
	f.slot[c] = -1
	f.columns, f.end, f.buf = f.columns[:last], f.end[:last], f.buf[:last*f.ld]
}

// compress replaces the rows of the front by a triangle.
func (f *Front) compress() {
	n, rows := len(f.columns), f.ld-f.top
	if rows <= n {
		return
	}
	f.tau = append(f.tau[:0], make([]float64, n)...)
	Factor(f.buf[f.top:], rows, n, f.ld, f.tau)
	to := f.ld - n
	for s := range n {
		c := f.column(s)
		copy(c[to:to+s+1], c[f.top:f.top+s+1])
		clear(c[f.top:min(to, f.ld)])
		clear(c[to+s+1:])
		f.end[s] = f.ld
	}
	f.top = to
}

// Finish eliminates what is left.
func (f *Front) Finish() {
	// The right-hand side goes last.
	rhs := f.slot[f.n]
	if n := len(f.columns) - 1; rhs >= 0 && rhs != n {
		a, b := f.column(rhs), f.column(n)
		for i := range a {
			a[i], b[i] = b[i], a[i]
		}
		f.columns[rhs], f.columns[n] = f.columns[n], f.columns[rhs]
		f.slot[f.columns[rhs]], f.slot[f.n] = rhs, n
	}
	n, rows := len(f.columns), f.ld-f.top
	f.tau = append(f.tau[:0], make([]float64, min(n, rows))...)
	if n > 0 {
		Factor(f.buf[f.top:], rows, n, f.ld, f.tau)
	}
	for i, c := range f.columns {
		if i >= rows {
			break
		}
		if c == f.n {
			f.Rest = max(f.column(i)[f.top+i], -f.column(i)[f.top+i])
			break
		}
		f.row(c, f.column(i)[f.top+i])
		for t := i + 1; t < n; t++ {
			f.put(f.columns[t], f.column(t)[f.top+i])
		}
	}
}
