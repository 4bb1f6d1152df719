package zeropoints

import (
	"math"

	"gonum.org/v1/gonum/mat"
)

// covariance returns the sandwich covariance of the levels and coefficients
// (Huber 1981, Robust Statistics, ch. 7): A⁻¹ B A⁻¹ with A and B the sums of
// the columns' products weighted by the mean slope and the mean square of the
// score. The means are taken over each instrument, drawn towards those of the
// normal distribution as by five rows more, so that a few rows do not make
// them up; and rows that scatter less than their published errors do not make
// the errors smaller.
func (s *state) covariance() *mat.SymDense {
	l, r := s.modelLevels()
	fitted := l.leverage(r)
	k0, width := len(s.level), s.width()
	size := k0 + width
	a, b := mat.NewSymDense(size, nil), mat.NewSymDense(size, nil)
	slope, square := s.scoreMoments(r, fitted)
	cross := make([]float64, size)
	for i, k := range r.instrument {
		cross = cross[:0]
		cross = append(cross, r.columns[i*width:(i+1)*width]...)
		wa, wb := r.weight[i]*slope[k], r.weight[i]*square[k]
		addProduct(a, k, k0, cross, wa)
		addProduct(b, k, k0, cross, wb)
	}
	return sandwich(a, b)
}

// addProduct adds w times the product of a row with itself: 1 at place k, the
// columns from place k0 on.
func addProduct(m *mat.SymDense, k, k0 int, columns []float64, w float64) {
	m.SetSym(k, k, m.At(k, k)+w)
	for j, x := range columns {
		m.SetSym(k, k0+j, m.At(k, k0+j)+w*x)
		for n := j; n < len(columns); n++ {
			m.SetSym(k0+j, k0+n, m.At(k0+j, k0+n)+w*x*columns[n])
		}
	}
}

// scoreMoments returns the mean slope and the mean square of the score for
// each instrument.
func (s *state) scoreMoments(r rows, fitted []float64) (slope, square []float64) {
	const prior = 5.0
	normal := s.problem.Loss.atNormal()
	slope, square = make([]float64, len(s.level)), make([]float64, len(s.level))
	for k, list := range s.members {
		if s.problem.Loss == LossGaussian { // the model's own covariance
			slope[k], square[k] = 1, 1
			continue
		}
		sumSlope, sumSquare := prior*normal.psiSlope, prior*normal.psiSquare
		for _, i := range list {
			u := s.residual[i] * math.Sqrt(r.weight[i])
			free := math.Max(1-fitted[i]*r.weight[i], 1e-3)
			psi := s.problem.Loss.psi(u / math.Sqrt(free))
			sumSlope += s.problem.Loss.psiSlope(u)
			sumSquare += psi * psi
		}
		rows := float64(len(list)) + prior
		slope[k] = math.Min(math.Max(sumSlope/rows, 0.2*normal.psiSlope), normal.psiSlope)
		square[k] = math.Max(sumSquare/rows, normal.psiSquare)
	}
	return slope, square
}

// sandwich returns a⁻¹ b a⁻¹, by the pseudo-inverse where a is singular.
func sandwich(a, b *mat.SymDense) *mat.SymDense {
	inverse := pseudoInverse(a)
	var half, full mat.Dense
	half.Mul(inverse, b)
	full.Mul(&half, inverse)
	n, _ := full.Dims()
	out := mat.NewSymDense(n, nil)
	for i := range n {
		for j := i; j < n; j++ {
			out.SetSym(i, j, (full.At(i, j)+full.At(j, i))/2)
		}
	}
	return out
}

// pseudoInverse inverts a symmetric matrix, leaving out directions that the
// data do not determine.
func pseudoInverse(a *mat.SymDense) *mat.SymDense {
	n := a.SymmetricDim()
	out := mat.NewSymDense(n, nil)
	d := newDirections(a)
	for m, value := range d.values {
		if d.isFree(m) {
			continue
		}
		for i := range n {
			for j := i; j < n; j++ {
				out.SetSym(i, j, out.At(i, j)+d.vectors.At(i, m)*d.vectors.At(j, m)/value*d.scale[i]*d.scale[j])
			}
		}
	}
	return out
}

// directions are the eigenvectors of a normal matrix whose diagonal was scaled
// to 1, so that their values do not depend on the units of the columns.
type directions struct {
	values  []float64
	vectors mat.Dense
	scale   []float64 // what each row and column was multiplied with
}

func newDirections(a *mat.SymDense) *directions {
	n := a.SymmetricDim()
	d := &directions{scale: make([]float64, n)}
	scaled := mat.NewSymDense(n, nil)
	for i := range n {
		d.scale[i] = 1
		if v := a.At(i, i); v > 0 {
			d.scale[i] = 1 / math.Sqrt(v)
		}
	}
	for i := range n {
		for j := i; j < n; j++ {
			scaled.SetSym(i, j, a.At(i, j)*d.scale[i]*d.scale[j])
		}
	}
	var eigen mat.EigenSym
	if eigen.Factorize(scaled, true) { // fails only on numbers that are not finite, which validation keeps out
		d.values = eigen.Values(nil)
		eigen.VectorsTo(&d.vectors)
	}
	return d
}

// isFree reports whether the data leave a direction undetermined.
func (d *directions) isFree(m int) bool {
	return d.values[m] <= degenerateBelow*float64(len(d.values))
}

// shares returns what the common level is made of: the level subtracted from
// all is the sum of share times (level - published zero point). variance is
// that of the published zero points in it.
func (s *state) shares(covariance *mat.SymDense) (share []float64, published []float64, variance float64) {
	p := s.problem
	share, published = make([]float64, len(s.level)), make([]float64, len(s.level))
	switch p.Gauge.Kind {
	case GaugeReference:
		share[p.Gauge.Reference] = 1
	case GaugeWeightedMean:
		for i, k := range s.rows.instrument {
			share[k] += 1 / math.Max(s.known[i]+s.jitter[k], smallestVariance)
		}
	case GaugePublished:
		for k, instrument := range p.Instruments {
			if instrument.HasPublished {
				sigma := instrument.PublishedSigmaKms
				published[k] = instrument.PublishedKms
				share[k] = 1 / math.Max(sigma*sigma+covariance.At(k, k), smallestVariance)
			}
		}
	}
	total := 0.0
	for _, w := range share {
		total += w
	}
	for k := range share {
		share[k] /= total
		sigma := p.Instruments[k].PublishedSigmaKms
		if p.Gauge.Kind == GaugePublished && p.Instruments[k].HasPublished {
			variance += share[k] * share[k] * sigma * sigma
		}
	}
	return share, published, variance
}
