package register

import (
	"crypto/sha256"
	"encoding/binary"
	"encoding/hex"
	"math"
)

// Sums of an entry. Every part goes into a sum with its length before it, so
// that no two different entries give the same bytes:
//
//	text:    8 bytes length, then its bytes
//	integer: 8 bytes
//	number:  the 8 bytes of IEEE 754 double precision
//
// all big-endian. The sum of the values covers their number and order; the sum
// of the row covers all the rest, with the sums of file and values in it.

type ink []byte

func (b ink) text(s string) ink    { return append(b.whole(int64(len(s))), s...) }
func (b ink) whole(n int64) ink    { return binary.BigEndian.AppendUint64(b, uint64(n)) }
func (b ink) number(x float64) ink { return binary.BigEndian.AppendUint64(b, math.Float64bits(x)) }

func (b ink) value(v *Value) ink {
	return b.text(v.Name).text(v.Condition).number(v.Value).number(v.U95).text(v.Unit)
}

func (b ink) sum() string { return hashOf(b) }

func hashOf(b []byte) string {
	s := sha256.Sum256(b)
	return hex.EncodeToString(s[:])
}

// valuesSum is the sum of a list of values.
func valuesSum(values []Value) string {
	b := ink(nil).text("phaselag register values 1").whole(int64(len(values)))
	for i := range values {
		b = b.value(&values[i])
	}
	return b.sum()
}

// rowSum is the sum of an entry's row.
func (h *head) rowSum() string {
	b := make(ink, 0, 1024).text("phaselag register entry 1").whole(h.ID)
	for _, s := range [...]string{h.Batch, h.Compound, h.Tested, h.Added, h.Who} {
		b = b.text(s)
	}
	b = b.whole(h.Corrects).text(h.Why).text(h.SHA256).whole(h.Size)
	b = b.text(h.inputs).whole(int64(h.Values)).text(h.valuesSum)
	return b.sum()
}

// mark ties one value to its entry and place: the first eight bytes of a
// SHA-256. It is short because a register holds forty of them for each batch.
func mark(entry int64, position int, v *Value) int64 {
	b := make(ink, 0, 256).whole(entry).whole(int64(position)).value(v)
	s := sha256.Sum256(b)
	return int64(binary.BigEndian.Uint64(s[:]))
}
