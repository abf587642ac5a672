package draws

import "math/rand/v2"

// Streams of the generators: every column and every row has its own, by its index.
const (
	columnStream = 1 << 62
	rowStream    = 1 << 61
)

// Hypercube is a Latin hypercube of n rows and k columns of chances u, 0 < u < 1: each column has one value in each of the n strata of
// width 1/n (McKay, Beckman & Conover 1979, Technometrics 21:239-245, from memory). Strata are shuffled in every column by itself, so that rows
// stand in random order and the first m are a fair sample. The same seed gives the same bits.
func Hypercube(n, k int, seed uint64) [][]float64 {
	if n <= 0 || k < 0 {
		return nil
	}
	out, flat := make([][]float64, n), make([]float64, n*k)
	for i := range out {
		out[i] = flat[i*k : (i+1)*k : (i+1)*k]
	}
	for j := range k {
		for i, stratum := range rand.New(rand.NewPCG(seed, columnStream+uint64(j))).Perm(n) {
			out[i][j] = float64(stratum)
		}
	}
	for i, row := range out {
		g := rand.NewPCG(seed, rowStream+uint64(i))
		for j := range row {
			row[j] = (row[j] + jitter(g)) / float64(n)
		}
	}
	return out
}

// jitter is in (0, 1), never at its ends, and of so few bits that a stratum's number can be added exactly.
func jitter(g *rand.PCG) float64 {
	return (float64(g.Uint64()>>32) + 0.5) / (1 << 32)
}
