package epochs

import "math"

// vector is a Cartesian triple; its axes and unit are those of its user.
type vector [3]float64

func (a vector) dot(b vector) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }

func (a vector) plus(b vector) vector { return vector{a[0] + b[0], a[1] + b[1], a[2] + b[2]} }

func (a vector) minus(b vector) vector { return vector{a[0] - b[0], a[1] - b[1], a[2] - b[2]} }

func (a vector) times(f float64) vector { return vector{a[0] * f, a[1] * f, a[2] * f} }

func (a vector) cross(b vector) vector {
	return vector{
		a[1]*b[2] - a[2]*b[1],
		a[2]*b[0] - a[0]*b[2],
		a[0]*b[1] - a[1]*b[0],
	}
}

func (a vector) length() float64 { return math.Sqrt(a.dot(a)) }

// unit returns a at length 1, and the zero vector for the zero vector.
func (a vector) unit() vector {
	if length := a.length(); length > 0 {
		return a.times(1 / length)
	}
	return vector{}
}

// fromSpherical returns the unit vector towards a longitude and latitude.
func fromSpherical(longitudeRad, latitudeRad float64) vector {
	sinLongitude, cosLongitude := math.Sincos(longitudeRad)
	sinLatitude, cosLatitude := math.Sincos(latitudeRad)
	return vector{cosLatitude * cosLongitude, cosLatitude * sinLongitude, sinLatitude}
}

// spherical returns the longitude in [0, 2 pi) and the latitude of a.
func (a vector) spherical() (longitudeRad, latitudeRad float64) {
	longitudeRad = math.Atan2(a[1], a[0])
	if longitudeRad < 0 {
		longitudeRad += 2 * math.Pi
	}
	return longitudeRad, math.Atan2(a[2], math.Hypot(a[0], a[1]))
}

// matrix is a rotation of axes: matrix times the components of a vector on
// the old axes are its components on the new ones.
type matrix [3][3]float64

func (m *matrix) times(a vector) vector {
	return vector{
		m[0][0]*a[0] + m[0][1]*a[1] + m[0][2]*a[2],
		m[1][0]*a[0] + m[1][1]*a[1] + m[1][2]*a[2],
		m[2][0]*a[0] + m[2][1]*a[1] + m[2][2]*a[2],
	}
}

// transposedTimes applies the inverse rotation.
func (m *matrix) transposedTimes(a vector) vector {
	return vector{
		m[0][0]*a[0] + m[1][0]*a[1] + m[2][0]*a[2],
		m[0][1]*a[0] + m[1][1]*a[1] + m[2][1]*a[2],
		m[0][2]*a[0] + m[1][2]*a[1] + m[2][2]*a[2],
	}
}

// after returns the rotation that applies first and then m.
func (m matrix) after(first matrix) matrix {
	var product matrix
	for i := range 3 {
		for j := range 3 {
			product[i][j] = m[i][0]*first[0][j] + m[i][1]*first[1][j] + m[i][2]*first[2][j]
		}
	}
	return product
}

// aboutX and aboutZ turn the axes by an angle, counter-clockwise as seen
// from the positive end of the axis.
func aboutX(angleRad float64) matrix {
	s, c := math.Sincos(angleRad)
	return matrix{{1, 0, 0}, {0, c, s}, {0, -s, c}}
}

func aboutY(angleRad float64) matrix {
	s, c := math.Sincos(angleRad)
	return matrix{{c, 0, -s}, {0, 1, 0}, {s, 0, c}}
}

func aboutZ(angleRad float64) matrix {
	s, c := math.Sincos(angleRad)
	return matrix{{c, s, 0}, {-s, c, 0}, {0, 0, 1}}
}

const (
	radPerDeg    = math.Pi / 180
	radPerArcsec = math.Pi / (180 * 3600)
)
