package epochs

import "math"

// TT returns the same instant on TT (IAU 1991 Resolution A4), exactly.
func (t TAI) TT() TT { return TT{t.AddSeconds(ttMinusTAIS)} }

// TAI returns the same instant on TAI, exactly.
func (t TT) TAI() TAI { return TAI{t.AddSeconds(-ttMinusTAIS)} }

// TDB returns the same instant on TDB at the Earth's centre, to 10
// microseconds.
func (t TT) TDB() TDB { return TDB{t.AddSeconds(tdbMinusTT(t))} }

// TT returns the same instant on TT, to 10 microseconds.
func (t TDB) TT() TT { return TT{t.AddSeconds(-tdbMinusTT(TT(t)))} }

// TDB returns the same instant on TDB (IAU 2006 Resolution B3): TDB = TCB -
// L_B (JD_TCB - T_0) 86400 s + TDB_0.
func (t TCB) TDB() TDB {
	const (
		rate                  = 1.550519768e-8
		start                 = -6.55e-5 // s
		originDay, originFrac = 2443144, 0.5003725
	)
	elapsed := t.Sub(JD{Day: originDay, Frac: originFrac})
	return TDB{t.Add(-rate * elapsed).AddSeconds(start)}
}

// tdbMinusTT returns TDB - TT in seconds at the Earth's centre (U.S. Naval
// Observatory Circular 179, eq. 2.6, the largest terms of Fairhead and
// Bretagnon 1990, A&A 229, 240), to 10 microseconds in 1600-2200. Taking TT
// for TDB in the argument errs by less than a picosecond.
func tdbMinusTT(t TT) float64 {
	c := centuries(t.JD)
	return 0.001657*math.Sin(628.3076*c+6.2401) +
		0.000022*math.Sin(575.3385*c+4.2970) +
		0.000014*math.Sin(1256.6152*c+6.1969) +
		0.000005*math.Sin(606.9777*c+4.0212) +
		0.000005*math.Sin(52.9691*c+0.4444) +
		0.000002*math.Sin(21.3299*c+5.5431) +
		0.000010*c*math.Sin(628.3076*c+4.2490)
}
