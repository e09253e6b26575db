package film

import (
	"math"
	"math/rand/v2"

	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/blas/blas32"
	"gonum.org/v1/gonum/mat"
)

// matrix is row-major.
type matrix struct{ blas32.General }

func newMatrix(rows, cols int) matrix {
	return matrix{blas32.General{Rows: rows, Cols: cols, Stride: max(cols, 1), Data: make([]float32, rows*cols)}}
}

func (m matrix) row(i int) []float32 { return m.Data[i*m.Cols:][:m.Cols] }

// times is a b, or a transposed times b.
func times(transposed blas.Transpose, a, b matrix) matrix {
	rows := a.Rows
	if transposed == blas.Trans {
		rows = a.Cols
	}
	c := newMatrix(rows, b.Cols)
	blas32.Gemm(transposed, blas.NoTrans, 1, a.General, b.General, 0, c.General)
	return c
}

// spare is how many directions more than asked are drawn, and powerRounds how
// often they are turned toward the large ones. Source: Halko, Martinsson,
// Tropp 2011, Finding structure with randomness, SIAM Review 53(2), algorithm
// 4.4 and its advice on oversampling (5 to 10) and rounds (1 or 2).
const (
	spare       = 8
	powerRounds = 1
)

// What the rounding of float32, 6e-8, leaves of nothing: empty bounds the square
// of a pattern's size against the largest one's, nothingNew the length of a
// column against what it was before others were taken from it. Own choice.
const (
	empty      = 1e-9
	nothingNew = 1e-6
)

// patterns are the largest singular directions of a, [pattern][column], of unit
// length, and their weights, [pattern][row]; fewer than rank where a has no more.
func patterns(a matrix, rank int) (basis, weights [][]float32) {
	wide := min(rank+spare, a.Rows, a.Cols)
	if wide < 1 {
		return nil, nil
	}
	// Any fixed numbers do: they decide no result, only its last digits.
	random := rand.New(rand.NewPCG(1, 2))
	q := newMatrix(a.Cols, wide)
	for i := range q.Data {
		q.Data[i] = float32(random.NormFloat64())
	}
	q = times(blas.NoTrans, a, q)
	orthonormal(q)
	for range powerRounds {
		z := times(blas.Trans, a, q)
		orthonormal(z)
		q = times(blas.NoTrans, a, z)
		orthonormal(q)
	}
	b := times(blas.Trans, a, q) // columns x wide
	square := mat.NewSymDense(wide, nil)
	for i := range wide {
		for j := i; j < wide; j++ {
			sum := 0.0
			for p := range b.Rows {
				sum += float64(b.Data[p*b.Stride+i]) * float64(b.Data[p*b.Stride+j])
			}
			square.SetSym(i, j, sum)
		}
	}
	var eigen mat.EigenSym
	if !eigen.Factorize(square, true) {
		return nil, nil
	}
	values := eigen.Values(nil) // rising
	var vectors mat.Dense
	eigen.VectorsTo(&vectors)
	for k := range rank {
		at := wide - 1 - k
		if at < 0 || values[at] <= empty*math.Max(values[wide-1], 1) {
			break
		}
		v := make([]float32, a.Cols)
		inv := 1 / math.Sqrt(values[at])
		for p := range v {
			sum := 0.0
			for i := range wide {
				sum += float64(b.Data[p*b.Stride+i]) * vectors.At(i, at)
			}
			v[p] = float32(sum * inv)
		}
		w := make([]float32, a.Rows)
		for i := range w {
			sum := float32(0)
			for p, x := range a.row(i) {
				sum += x * v[p]
			}
			w[i] = sum
		}
		basis, weights = append(basis, v), append(weights, w)
	}
	return basis, weights
}

// orthonormal makes the columns unit vectors at right angles, by the modified
// Gram-Schmidt process run twice; columns without anything new become 0.
// Source: Golub, Van Loan, Matrix Computations, 4th ed. 2013, 5.2.8.
func orthonormal(m matrix) {
	col := make([][]float64, m.Cols)
	for j := range col {
		col[j] = make([]float64, m.Rows)
		for i := range m.Rows {
			col[j][i] = float64(m.Data[i*m.Stride+j])
		}
	}
	for j := range col {
		before := math.Sqrt(dot(col[j], col[j]))
		for range 2 {
			for k := range j {
				d := dot(col[j], col[k])
				for i := range col[j] {
					col[j][i] -= d * col[k][i]
				}
			}
		}
		size := math.Sqrt(dot(col[j], col[j]))
		scale := 0.0
		if size > nothingNew*before {
			scale = 1 / size
		}
		for i := range col[j] {
			col[j][i] *= scale
			m.Data[i*m.Stride+j] = float32(col[j][i])
		}
	}
}

func dot(a, b []float64) float64 {
	sum := 0.0
	for i := range a {
		sum += a[i] * b[i]
	}
	return sum
}
