package epochs

import (
	"strconv"
	"strings"
)

// monthNames lists how tables print each month, in English, German, French,
// Italian and Latin (nominative and the genitive of dates); a name may be cut to three letters or more where that
// leaves one month only.
var monthNames = [12][]string{
	{"january", "januar", "jänner", "janvier", "gennaio", "ianuarius", "januarius", "ianuarii", "januarii"},
	{"february", "februar", "feber", "février", "fevrier", "febbraio", "februarius", "februarii"},
	{"march", "märz", "maerz", "mars", "marzo", "martius", "martii", "mrz"},
	{"april", "avril", "aprile", "aprilis"},
	{"may", "mai", "maggio", "maius", "maii"},
	{"june", "juni", "juin", "giugno", "iunius", "junius", "iunii", "junii"},
	{"july", "juli", "juillet", "luglio", "iulius", "julius", "iulii", "julii"},
	{"august", "août", "aout", "agosto", "augustus", "augusti"},
	{"september", "septembre", "settembre", "septembris"},
	{"october", "oktober", "octobre", "ottobre", "octobris"},
	{"november", "novembre", "novembris"},
	{"december", "dezember", "décembre", "decembre", "dicembre", "decembris"},
}

var romanMonths = [12]string{"i", "ii", "iii", "iv", "v", "vi", "vii", "viii", "ix", "x", "xi", "xii"}

// monthNamed returns the month of a number, a name or a Roman numeral.
func monthNamed(text string) (int, bool) {
	word := strings.ToLower(strings.Trim(strings.TrimSpace(text), ".,"))
	if n, err := strconv.Atoi(word); err == nil {
		return n, n >= 1 && n <= 12 && len(word) <= 2
	}
	for i, roman := range romanMonths {
		if word == roman {
			return i + 1, true
		}
	}
	if len([]rune(word)) < 3 {
		return 0, false
	}
	found := 0
	for i, names := range monthNames {
		for _, name := range names {
			if name == word {
				return i + 1, true
			}
			if strings.HasPrefix(name, word) {
				if found != 0 && found != i+1 {
					return 0, false // "jui" is juin or juillet
				}
				found = i + 1
			}
		}
	}
	return found, found != 0
}
