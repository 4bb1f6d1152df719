package ephemeris

import (
	"encoding/binary"
	"errors"
	"fmt"
	"math"
	"os"
)

// ErrSPK is what every error about the content of an SPK file unwraps to.
var ErrSPK = errors.New("ephemeris: not a usable SPK file")

// SPK is an ephemeris in a file of NAIF's open SPK format (NAIF, "SPK Required
// Reading" and "DAF Required Reading"), with segments of type 2 (Chebyshev
// places) or 3 (places and velocities) on the axes of J2000. The file is held
// in memory; an SPK is safe for concurrent use.
type SPK struct {
	path     string
	words    []byte // the whole file
	order    binary.ByteOrder
	segments []spkSegment
}

// spkSegment is the motion of one body about another.
type spkSegment struct {
	target, centre  int
	startS, endS    float64 // TDB seconds from J2000
	components      int     // 3 of type 2, 6 of type 3
	first           int     // word, from 0, of the first record
	records, length int     // number of records, words in each
	initS, stepS    float64 // of the records
}

// NAIF's numbers of the bodies.
const (
	naifBarycentre = 0
	naifSun        = 10
	naifEarth      = 399
)

// largestSPK bounds the file that is read into memory, in bytes.
const largestSPK = 4 << 30

const wordBytes = 8

// OpenSPK reads an SPK file. Errors: those of the file system; ErrSPK for
// content that is not of the format, holds no Sun or Earth, or segments of
// other types for them.
func OpenSPK(path string) (*SPK, error) {
	info, err := os.Stat(path)
	if err != nil {
		return nil, fmt.Errorf("ephemeris: %w", err)
	}
	if info.Size() > largestSPK {
		return nil, fmt.Errorf("%w: %s has %d bytes; up to %d are accepted", ErrSPK, path, info.Size(), largestSPK)
	}
	content, err := os.ReadFile(path)
	if err != nil {
		return nil, fmt.Errorf("ephemeris: %w", err)
	}
	return parseSPK(path, content)
}

func parseSPK(path string, content []byte) (*SPK, error) {
	s := &SPK{path: path, words: content}
	if len(content) < 1024 || string(content[:7]) != "DAF/SPK" {
		return nil, fmt.Errorf("%w: %s does not begin with DAF/SPK", ErrSPK, path)
	}
	switch string(content[88:96]) {
	case "LTL-IEEE":
		s.order = binary.LittleEndian
	case "BIG-IEEE":
		s.order = binary.BigEndian
	default:
		return nil, fmt.Errorf("%w: %s is in the format %q; LTL-IEEE and BIG-IEEE are accepted", ErrSPK, path, content[88:96])
	}
	doubles, integers := s.integer(8), s.integer(12)
	if doubles != 2 || integers != 6 {
		return nil, fmt.Errorf("%w: %s has summaries of %d and %d numbers, not 2 and 6", ErrSPK, path, doubles, integers)
	}
	if err := s.readSummaries(s.integer(76)); err != nil {
		return nil, err
	}
	for _, body := range []int{naifSun, naifEarth} {
		if !s.has(body) {
			return nil, fmt.Errorf("%w: %s does not hold body %d of types 2 or 3", ErrSPK, path, body)
		}
	}
	return s, nil
}

// integer reads a 32-bit integer at a byte.
func (s *SPK) integer(at int) int { return int(int32(s.order.Uint32(s.words[at:]))) }

// word reads the word-th number, from 0.
func (s *SPK) word(word int) float64 {
	return math.Float64frombits(s.order.Uint64(s.words[word*wordBytes:]))
}

// readSummaries follows the chain of summary records from a record, counted
// from 1.
func (s *SPK) readSummaries(record int) error {
	const summaryWords, recordWords = 5, 128
	for visited := 0; record != 0; visited++ {
		if record < 1 || visited > len(s.words)/1024 || record*1024 > len(s.words) {
			return fmt.Errorf("%w: %s: the summaries lead out of the file", ErrSPK, s.path)
		}
		base := (record - 1) * recordWords
		count := s.word(base + 2)
		if !(count >= 0 && count <= (recordWords-3)/summaryWords) {
			return fmt.Errorf("%w: %s: a record of %v summaries", ErrSPK, s.path, count)
		}
		for i := range int(count) {
			if err := s.readSummary(base + 3 + i*summaryWords); err != nil {
				return err
			}
		}
		next := s.word(base)
		if !(next >= 0 && next <= float64(len(s.words))) {
			return fmt.Errorf("%w: %s: the next summary record is number %v", ErrSPK, s.path, next)
		}
		record = int(next)
	}
	return nil
}

// readSummary reads the segment whose summary is at a word; segments that are
// not wanted are passed over.
func (s *SPK) readSummary(at int) error {
	integer := func(i int) int { return s.integer((at+2)*wordBytes + 4*i) }
	g := spkSegment{startS: s.word(at), endS: s.word(at + 1), target: integer(0), centre: integer(1)}
	frame, kind, first, last := integer(2), integer(3), integer(4), integer(5)
	const j2000Frame = 1
	if frame != j2000Frame || kind != 2 && kind != 3 {
		return nil
	}
	fault := func(what string) error {
		return fmt.Errorf("%w: %s: the segment of body %d %s", ErrSPK, s.path, g.target, what)
	}
	if first < 1 || last < first+3 || last > len(s.words)/wordBytes {
		return fault("lies outside the file")
	}
	g.first, g.components = first-1, 3*(kind-1)
	g.initS, g.stepS = s.word(last-4), s.word(last-3)
	length, records := s.word(last-2), s.word(last-1)
	words := float64(last - first + 1)
	if !(g.stepS > 0) || math.IsInf(g.stepS, 0) || math.IsNaN(g.initS) || !(length >= 2+float64(g.components) && length <= words) || !(records >= 1 && records <= words) || !(records*length <= words-4) {
		return fault("states records that it cannot hold")
	}
	g.length, g.records = int(length), int(records)
	if (g.length-2)%g.components != 0 {
		return fault("has records of a broken length")
	}
	s.segments = append(s.segments, g)
	return nil
}

func (s *SPK) has(body int) bool {
	for _, g := range s.segments {
		if g.target == body {
			return true
		}
	}
	return false
}

// At returns the state at an instant of TDB, a Julian date in two parts. An
// instant that the file does not cover is an error that wraps ErrRange.
func (s *SPK) At(day, fraction float64) (State, error) {
	seconds := (day - j2000 + fraction) * 86400
	var state State
	var err error
	if state.SunKm, state.SunKmS, err = s.fromBarycentre(naifSun, seconds); err != nil {
		return State{}, err
	}
	state.EarthKm, state.EarthKmS, err = s.fromBarycentre(naifEarth, seconds)
	return state, err
}

// fromBarycentre adds up the chain of segments from a body to the barycentre.
func (s *SPK) fromBarycentre(body int, seconds float64) (km, kmS [3]float64, err error) {
	const longestChain = 8
	for link := 0; body != naifBarycentre; link++ {
		g := s.segmentAt(body, seconds)
		if g == nil || link == longestChain {
			return km, kmS, fmt.Errorf("%w: JD %.1f for body %d in %s", ErrRange, j2000+seconds/86400, body, s.path)
		}
		place, velocity := s.evaluate(g, seconds)
		for k := range km {
			km[k], kmS[k] = km[k]+place[k], kmS[k]+velocity[k]
		}
		body = g.centre
	}
	return km, kmS, nil
}

// segmentAt returns the segment of a body that covers an instant; the last in
// the file has precedence.
func (s *SPK) segmentAt(body int, seconds float64) *spkSegment {
	for i := len(s.segments) - 1; i >= 0; i-- {
		if g := &s.segments[i]; g.target == body && seconds >= g.startS && seconds <= g.endS {
			return g
		}
	}
	return nil
}

// evaluate returns the place in km and the velocity in km/s of a segment at an
// instant that it covers.
func (s *SPK) evaluate(g *spkSegment, seconds float64) (km, kmS [3]float64) {
	record := int(math.Max(0, math.Min(float64(g.records-1), math.Floor((seconds-g.initS)/g.stepS))))
	base := g.first + record*g.length
	middle, radius := s.word(base), s.word(base+1)
	x := (seconds - middle) / radius
	n := (g.length - 2) / g.components
	for k := range 3 {
		var rate float64
		km[k], rate = s.series(base+2+k*n, n, x)
		kmS[k] = rate / radius
		if g.components == 6 {
			kmS[k], _ = s.series(base+2+(3+k)*n, n, x)
		}
	}
	return km, kmS
}

// series sums n Chebyshev coefficients from a word on, and their derivative.
func (s *SPK) series(at, n int, x float64) (value, rate float64) {
	var b1, b2, d1, d2 float64
	for i := n - 1; i >= 1; i-- {
		b1, b2, d1, d2 = s.word(at+i)+2*x*b1-b2, b1, 2*b1+2*x*d1-d2, d1
	}
	return s.word(at) + x*b1 - b2, b1 + x*d1 - d2
}
