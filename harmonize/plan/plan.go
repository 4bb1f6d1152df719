package plan

// Plan is a whole plan as written, with the defaults not yet filled in.
//
// The tags of each field are its documentation: toml is the key, doc its
// meaning, unit its unit, default what is assumed when it is absent, and need
// says "required" where nothing is assumed.
type Plan struct {
	Title       string       `toml:"title" doc:"A title for the summary and the report." default:"the star's name"`
	Ephemeris   string       `toml:"ephemeris" doc:"A JPL ephemeris in a file of NAIF's SPK format (.bsp), relative to the plan; dates that it does not cover use the embedded one." default:"the embedded one, VSOP87"`
	Star        Star         `toml:"star" doc:"The star whose velocities are merged." need:"required"`
	Sites       []Site       `toml:"site" doc:"One block for each place where an instrument stood."`
	Instruments []Instrument `toml:"instrument" doc:"One block for each instrument: a spectrograph with one zero point and one jitter." need:"required"`
	Sources     []Source     `toml:"source" doc:"One block for each published table." need:"required"`
	Duplicates  Duplicates   `toml:"duplicates" doc:"How exposures published more than once are recognised."`
	Fit         Fit          `toml:"fit" doc:"How the zero points are estimated."`
	NightTest   NightTest    `toml:"night_test" doc:"When the star could be observed: a date that falls in daylight at its site was misread. Rows that fail are flagged, never changed."`
	Bundle      Bundle       `toml:"bundle" doc:"Where the results go."`

	// Path is the file that was read, and Text its content to the byte.
	Path string `toml:"-"`
	Text []byte `toml:"-"`

	lines lineIndex
}

// Star is the star's place in the sky and its motion.
type Star struct {
	Name              string   `toml:"name" doc:"The star's name." need:"required"`
	Aliases           []string `toml:"aliases" doc:"Other names under which a table's star column may list it."`
	RA                any      `toml:"ra" doc:"Right ascension: \"14 22 31.80\" in hours, minutes, seconds, or a number of degrees." need:"required"`
	Dec               any      `toml:"dec" doc:"Declination: \"-12 04 55.1\", or a number of degrees." need:"required"`
	Frame             string   `toml:"frame" doc:"Frame of the position and proper motion: \"ICRS\", \"B1950\" or \"B1900\"." default:"ICRS"`
	PositionEpoch     float64  `toml:"position_epoch" doc:"Epoch of the position; of an ICRS position as a Julian year, otherwise a Besselian year." unit:"year" default:"2000 for ICRS, else that of the frame"`
	PMRA              float64  `toml:"pm_ra" doc:"Proper motion in right ascension, with the factor cos(declination)." unit:"mas/yr" default:"0"`
	PMDec             float64  `toml:"pm_dec" doc:"Proper motion in declination." unit:"mas/yr" default:"0"`
	Parallax          float64  `toml:"parallax" doc:"Parallax." unit:"mas" default:"0, infinitely far"`
	RemovePerspective bool     `toml:"remove_perspective" doc:"Whether the change of velocity by perspective since the position's epoch is taken out of all velocities." default:"false"`
	SystemicVelocity  float64  `toml:"systemic_velocity" doc:"Systemic velocity, positive receding; it moves the star through space, and nothing else." unit:"km/s" default:"0"`
}

// Site is a place where instruments stood.
type Site struct {
	Name      string   `toml:"name" doc:"Name by which instruments refer to the site." need:"required"`
	Longitude *float64 `toml:"longitude" doc:"Longitude, east positive." unit:"degrees" need:"required"`
	Latitude  *float64 `toml:"latitude" doc:"Geodetic latitude, north positive." unit:"degrees" need:"required"`
	Height    float64  `toml:"height" doc:"Height above the ellipsoid." unit:"m" default:"0"`
}

// Instrument is a spectrograph, or one reduction of its exposures, with one
// zero point and one jitter in each of its eras.
type Instrument struct {
	Name           string   `toml:"name" doc:"The instrument's name in the results." need:"required"`
	Site           string   `toml:"site" doc:"Name of the site where it stood; without one its dates are taken at the Earth's centre, and flagged." default:"none"`
	Spectrograph   string   `toml:"spectrograph" doc:"The spectrograph that made the exposures. Give two reductions of the same exposures two instruments with one spectrograph: each keeps its own zero point, and an exposure in both is used once." default:"the instrument's name"`
	Aliases        []string `toml:"aliases" doc:"Other names under which an instrument column may list it."`
	Eras           []Era    `toml:"eras" doc:"Stretches of its life, in order, after each of which the zero point can shift." default:"one era"`
	ZeroPoint      *float64 `toml:"zero_point" doc:"Published zero point: what is to be subtracted from its velocities." unit:"km/s" default:"none"`
	ZeroPointError float64  `toml:"zero_point_error" doc:"Standard error of the published zero point." unit:"km/s" default:"0"`
	DefaultError   float64  `toml:"default_error" doc:"Standard error assumed for its rows that print none; 0 lets its fitted scatter stand for it." unit:"km/s" default:"0"`
}

// Era is a stretch of an instrument's life.
type Era struct {
	Name  string `toml:"name" doc:"The era's name; the results list it as instrument/era." need:"required"`
	Until string `toml:"until" doc:"Its last moment, as an ISO date or a Julian date; only the last era has none."`
}

// Source is one published table with its conventions.
type Source struct {
	Name         string     `toml:"name" doc:"A short name; rows of the merged series are called name:row." need:"required"`
	File         string     `toml:"file" doc:"The table's file, relative to the plan. May be compressed with gzip." need:"required"`
	Reference    string     `toml:"reference" doc:"Where the table was published." need:"required"`
	Year         int        `toml:"year" doc:"Year of publication; decides between duplicates that precedence does not name." default:"0, unknown"`
	Format       string     `toml:"format" doc:"\"xlsx\", \"delimited\" (comma, tab, semicolon, bar), \"columns\" (set apart by blanks) or \"fixed\" (with a byte-by-byte ReadMe)." default:"from the file"`
	Sheet        string     `toml:"sheet" doc:"Sheet of a workbook." default:"the first, when there is one only"`
	HeaderRow    int        `toml:"header_row" doc:"Row that holds the column names, counted from 1; -1 when there is none." default:"the first row that is no comment"`
	ColumnNames  []string   `toml:"column_names" doc:"Names of the columns, for a table without a header."`
	ReadMe       string     `toml:"readme" doc:"The byte-by-byte description of a fixed-width table, relative to the plan."`
	Table        string     `toml:"table" doc:"The table's name in the ReadMe, when it is not the file's."`
	Delimiter    string     `toml:"delimiter" doc:"What stands between the cells of a delimited table." default:"found out"`
	Comment      string     `toml:"comment" doc:"What a comment line starts with." default:"#"`
	DecimalComma bool       `toml:"decimal_comma" doc:"Whether numbers are printed with a decimal comma." default:"false"`
	Missing      []string   `toml:"missing" doc:"Further texts that mean \"no value\", beside a blank, dashes and dots." default:"none"`
	Instrument   string     `toml:"instrument" doc:"The instrument of every row; otherwise columns.instrument names it row by row."`
	Means        bool       `toml:"means" doc:"Whether its rows are means of several exposures; a mean in use answers for every exposure of another source within duplicates.within_days, not for one only." default:"false"`
	Columns      Columns    `toml:"columns" doc:"Which column holds what, by the column's name."`
	Time         Time       `toml:"time" doc:"How the dates are to be read."`
	Velocity     Velocity   `toml:"velocity" doc:"How the velocities are to be read."`
	Error        Error      `toml:"error" doc:"How the errors are to be read."`
	SetAside     []SetAside `toml:"set_aside" doc:"Rows kept out of the merged series, each with a reason."`
}

// Columns names the columns of a source. Either time, or year, month and day
// (with hour, minute and second where they are there), are given.
type Columns struct {
	Time       string `toml:"time" doc:"The date, in one column."`
	Year       string `toml:"year" doc:"The year, of a date split over columns. A blank or a ditto repeats the row above, as for month and day."`
	Month      string `toml:"month" doc:"The month: a number, a name or a Roman numeral."`
	Day        string `toml:"day" doc:"The day, with or without a fraction."`
	Hour       string `toml:"hour" doc:"The hour."`
	Minute     string `toml:"minute" doc:"The minute."`
	Second     string `toml:"second" doc:"The second."`
	Velocity   string `toml:"velocity" doc:"The velocity." need:"required"`
	Error      string `toml:"error" doc:"The error of the velocity; needed unless error.kind is \"none\"."`
	Instrument string `toml:"instrument" doc:"The instrument, when the rows differ in it."`
	Star       string `toml:"star" doc:"The star, when the table lists several; rows of other stars are set aside."`
	Exposure   string `toml:"exposure" doc:"Number or name of the exposure or plate, kept in the ledger."`
	Remark     string `toml:"remark" doc:"Remarks, kept in the ledger."`
}

// Time says how the dates of a source are to be read.
type Time struct {
	Form          string  `toml:"form" doc:"\"jd\", \"mjd\", \"iso\", \"civil\" (a date with month and decimal day or hours), \"fields\" (split columns), \"julian_year\", \"besselian_year\", \"civil_year\" or \"spreadsheet\" (date cells)." need:"required"`
	Offset        any     `toml:"offset" doc:"For form \"jd\": what was subtracted from the Julian date, such as 2400000 or 2450000.5." unit:"d" default:"0"`
	Scale         string  `toml:"scale" doc:"\"utc\", \"ut\", \"gmt\", \"gmat\", \"ut1\", \"local_mean\", \"zone\", \"local_sidereal\", \"tai\", \"tt\", \"tdb\" or \"tcb\"." default:"tdb at the barycentre, else utc (before 1960: ut)"`
	ZoneHours     float64 `toml:"zone_hours" doc:"For scale \"zone\": hours to be subtracted to get Greenwich time; east of Greenwich positive." unit:"h" default:"0"`
	Place         string  `toml:"place" doc:"Where the dates hold: \"observatory\", \"geocentre\", \"heliocentre\" (HJD) or \"barycentre\" (BJD)." default:"observatory"`
	Calendar      string  `toml:"calendar" doc:"\"gregorian\" or \"julian\" (Old Style)." default:"gregorian"`
	DayStarts     string  `toml:"day_starts" doc:"\"midnight\" or \"noon\". Dates labelled \"gmt\" before 1925 must state it." default:"midnight; noon for gmat"`
	ExposurePoint string  `toml:"exposure_point" doc:"Which moment of the exposure the date gives: \"mid\", \"start\", \"end\" or \"unknown\"." default:"mid"`
	ExposureS     float64 `toml:"exposure_seconds" doc:"Usual length of an exposure." unit:"s" default:"0, unknown"`
}

// Velocity says how the velocities of a source are to be read.
type Velocity struct {
	Unit               string       `toml:"unit" doc:"\"km/s\" or \"m/s\"." default:"the unit that the table states, else km/s"`
	Frame              string       `toml:"frame" doc:"\"observatory\" (as measured), \"geocentric\", \"heliocentric\", \"barycentric\" or \"lsr\"." need:"required"`
	SolarMotion        *SolarMotion `toml:"solar_motion" doc:"For frame \"lsr\": the motion of the Sun that the table's author used."`
	KeepHeliocentric   bool         `toml:"keep_heliocentric" doc:"Whether heliocentric velocities stay as printed, instead of being moved to the barycentre by the Sun's velocity along the line of sight (at most 16 m/s)." default:"false"`
	PerspectiveRemoved bool         `toml:"perspective_removed" doc:"Whether the table has taken out the change of velocity by perspective already; it is not taken out twice." default:"false"`
	Convention         string       `toml:"convention" doc:"How a wavelength shift became a velocity: \"optical\" (c z), \"relativistic\" or \"radio\"." default:"optical"`
}

// SolarMotion is the Sun's motion about a local standard of rest.
type SolarMotion struct {
	Speed float64 `toml:"speed" doc:"Speed." unit:"km/s" need:"required"`
	RA    float64 `toml:"ra" doc:"Right ascension of the apex, ICRS." unit:"degrees" need:"required"`
	Dec   float64 `toml:"dec" doc:"Declination of the apex, ICRS." unit:"degrees" need:"required"`
}

// Error says how the errors of a source are to be read.
type Error struct {
	Kind  string  `toml:"kind" doc:"\"standard\", \"probable\" (divided by 0.6745 to give a standard error) or \"none\"." default:"standard when columns.error is given, else none"`
	Unit  string  `toml:"unit" doc:"\"km/s\" or \"m/s\"." default:"the velocity's unit"`
	Floor float64 `toml:"floor" doc:"Added in quadrature to every error of the source." unit:"km/s" default:"0"`
}

// SetAside picks rows of a source that are kept out of the merged series.
type SetAside struct {
	Rows   []int  `toml:"rows" doc:"Row numbers as counted in the file or sheet, from 1."`
	Column string `toml:"column" doc:"Or a column whose text decides."`
	Equals string `toml:"equals" doc:"The text that sets a row aside, in that column."`
	Reason string `toml:"reason" doc:"Why; it goes into the ledger." need:"required"`
}

// Duplicates says when two rows are one exposure, and which is used.
type Duplicates struct {
	WithinDays *float64 `toml:"within_days" doc:"Rows of two sources, of one spectrograph and star, whose barycentric times differ by no more than this are one exposure; 0 looks for none." unit:"d" default:"0.0005"`
	Precedence []string `toml:"precedence" doc:"Sources, the best first: of one exposure the first source listed is used. Sources not listed follow, the latest year first, then the last in the plan." default:"by year"`
}

// Fit says how the zero points are estimated.
type Fit struct {
	Trend               int       `toml:"trend" doc:"Degree of a polynomial trend of the star's velocity, 0 to 3." default:"0"`
	Period              float64   `toml:"period" doc:"Period of the star's motion; refined in the fit." unit:"d" default:"none"`
	PeriodRange         []float64 `toml:"period_range" doc:"Or the shortest and the longest period to try, each with the zero points free." unit:"d" default:"none"`
	Harmonics           int       `toml:"harmonics" doc:"Number of harmonics of the periodic term, the fundamental included." default:"1 with a period"`
	Loss                string    `toml:"loss" doc:"How rows far off are weighed: \"student\", \"huber\" or \"gaussian\"." default:"student"`
	Gauge               string    `toml:"gauge" doc:"What fixes the common system: \"reference\", \"mean\" or \"published\"." default:"reference when one is named, else mean"`
	ReferenceInstrument string    `toml:"reference_instrument" doc:"The instrument, or instrument/era, whose zero point is 0." default:"none"`
	Seed                uint64    `toml:"seed" doc:"Seed for whatever is drawn at random." default:"0"`
}

// NightTest says how high Sun and star can stand when a spectrum is taken.
type NightTest struct {
	SunBelow  *float64 `toml:"sun_below" doc:"Altitude that the Sun must be below." unit:"degrees" default:"-6"`
	StarAbove *float64 `toml:"star_above" doc:"Altitude that the star must be above." unit:"degrees" default:"0"`
}

// Bundle says where the results go.
type Bundle struct {
	Folder string `toml:"folder" doc:"The bundle's folder, relative to the plan." default:"bundle"`
}
