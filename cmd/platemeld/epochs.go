package main

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"

	"platemeld/epochs"
	"platemeld/harmonize"
	"platemeld/harmonize/plan"
)

// epochsOptions holds the flags in the words of the plan, so that a date
// means the same on the command line as in a source.
type epochsOptions struct {
	planPath, sourceName, instrument string
	star                             plan.Star
	ra, dec                          string
	longitude, latitude, height      float64
	time                             plan.Time
	offset                           string
	json, csv, itemise, uncertainty  bool
}

func newEpochsCommand() *cobra.Command {
	var o epochsOptions
	command := &cobra.Command{
		Use:   "epochs [STAMP...]",
		Short: "Convert dates to BJD_TDB",
		Long: `Convert stamps (dates as printed) to BJD_TDB: those given as arguments, or
else the lines of standard input. The star comes from a plan or from --ra and
--dec; how the stamps are read comes from a source of the plan or from the
flags, which use the plan's words.`,
		Example: `  platemeld epochs --plan testdata/demo/plan.toml --form iso 2003-06-01T04:00:00
  platemeld epochs --ra "14 22 31.8" --dec "-12 04 55" --form civil --scale gmat \
      --longitude 23.5 --latitude -31 --itemise "1908 Jan 14.62"
  cut -f1 dates.tsv | platemeld epochs --plan plan.toml --source plates --csv`,
		RunE: func(command *cobra.Command, arguments []string) error {
			return runEpochs(command, arguments, o)
		},
	}
	flags := command.Flags()
	flags.StringVar(&o.planPath, "plan", "", "plan that describes the star")
	flags.StringVar(&o.sourceName, "source", "", "source of the plan whose dates these are")
	flags.StringVar(&o.instrument, "instrument", "", "instrument of the plan that made them, for its site")
	flags.StringVar(&o.ra, "ra", "", "right ascension: hours, minutes, seconds, or degrees")
	flags.StringVar(&o.dec, "dec", "", "declination: degrees, minutes, seconds")
	flags.StringVar(&o.star.Frame, "frame", "ICRS", "frame of the position: ICRS, B1950 or B1900")
	flags.Float64Var(&o.star.PositionEpoch, "position-epoch", 0, "epoch of the position (year)")
	flags.Float64Var(&o.star.PMRA, "pm-ra", 0, "proper motion in right ascension, with cos(declination) (mas/yr)")
	flags.Float64Var(&o.star.PMDec, "pm-dec", 0, "proper motion in declination (mas/yr)")
	flags.Float64Var(&o.star.Parallax, "parallax", 0, "parallax (mas)")
	flags.Float64Var(&o.star.SystemicVelocity, "systemic-velocity", 0, "systemic velocity (km/s)")
	flags.Float64Var(&o.longitude, "longitude", 0, "site's longitude, east positive (degrees)")
	flags.Float64Var(&o.latitude, "latitude", 0, "site's latitude (degrees)")
	flags.Float64Var(&o.height, "height", 0, "site's height (m)")
	flags.StringVar(&o.time.Form, "form", "", "form of the dates: jd, mjd, iso, civil, ...")
	flags.StringVar(&o.offset, "offset", "", "what was subtracted from the JD (d)")
	flags.StringVar(&o.time.Scale, "scale", "", "time scale: utc, ut, gmat, tt, tdb, ...")
	flags.Float64Var(&o.time.ZoneHours, "zone-hours", 0, "for scale zone: hours east of Greenwich")
	flags.StringVar(&o.time.Place, "place", "", "observatory, geocentre, heliocentre or barycentre")
	flags.StringVar(&o.time.Calendar, "calendar", "", "gregorian or julian")
	flags.StringVar(&o.time.DayStarts, "day-starts", "", "midnight or noon")
	flags.StringVar(&o.time.ExposurePoint, "exposure-point", "", "mid, start, end or unknown")
	flags.Float64Var(&o.time.ExposureS, "exposure-seconds", 0, "length of an exposure (s)")
	flags.BoolVar(&o.json, "json", false, "print a JSON object for each stamp, one a line")
	flags.BoolVar(&o.csv, "csv", false, "print comma-separated values")
	flags.BoolVar(&o.itemise, "itemise", false, "print each term of the conversion in seconds")
	flags.BoolVar(&o.uncertainty, "uncertainty", false, "print the standard uncertainty of each epoch in seconds")
	command.MarkFlagsMutuallyExclusive("json", "csv", "itemise")
	command.MarkFlagsRequiredTogether("longitude", "latitude")
	command.MarkFlagsRequiredTogether("ra", "dec")
	command.MarkFlagsMutuallyExclusive("plan", "ra")
	return command
}

// runEpochs converts one stamp after the other and holds no more than one. A
// stamp that cannot be converted is named with its number, the rest are
// converted, and the exit code is 1.
func runEpochs(command *cobra.Command, arguments []string, o epochsOptions) error {
	stamps, err := o.stamps(command)
	if err != nil {
		return err
	}
	out := bufio.NewWriterSize(command.OutOrStdout(), 1<<16)
	write := o.writer(out)
	failed := 0
	withVelocity := o.itemise || o.json
	convert := func(number int, text string) error {
		var epoch epochs.Epoch
		var velocity epochs.BarycentricVelocity
		var err error
		if withVelocity {
			epoch, velocity, err = stamps.ConvertWithVelocity(text)
		} else {
			epoch, err = stamps.Convert(text)
		}
		if err != nil {
			failed++
			if err := out.Flush(); err != nil {
				return err
			}
			fmt.Fprintf(command.ErrOrStderr(), "stamp %d, reads %q: %v\n", number, text, err)
			return nil
		}
		return write(text, epoch, velocity)
	}
	if err := eachStamp(command, arguments, convert); err != nil {
		return err
	}
	if err := out.Flush(); err != nil {
		return err
	}
	if failed > 0 {
		return fmt.Errorf("%d stamps could not be converted", failed)
	}
	return nil
}

// eachStamp calls convert for each argument, or for each line of the input
// that is not blank.
func eachStamp(command *cobra.Command, arguments []string, convert func(number int, text string) error) error {
	for i, text := range arguments {
		if err := convert(i+1, text); err != nil {
			return err
		}
	}
	if len(arguments) > 0 {
		return nil
	}
	in := bufio.NewReaderSize(command.InOrStdin(), 1<<16)
	for number := 1; ; number++ {
		if number%4096 == 0 && command.Context().Err() != nil {
			return command.Context().Err()
		}
		line, err := in.ReadString('\n')
		if text := strings.TrimSpace(line); text != "" {
			if err := convert(number, text); err != nil {
				return err
			}
		}
		if errors.Is(err, io.EOF) {
			return nil
		}
		if err != nil {
			return fmt.Errorf("reading standard input: %w", err)
		}
	}
}

// stamps joins the plan and the flags; a flag stands above the plan.
func (o *epochsOptions) stamps(command *cobra.Command) (*harmonize.Stamps, error) {
	settings := harmonize.StampSettings{Star: o.star, Time: o.time, Source: o.sourceName, Instrument: o.instrument}
	switch {
	case o.planPath != "":
		p, err := plan.Load(o.planPath)
		if err != nil {
			return nil, err
		}
		settings.Plan = p
	case o.ra == "":
		return nil, fmt.Errorf("%w: which star? Give --plan, or --ra and --dec", errUsage)
	case o.sourceName != "" || o.instrument != "":
		return nil, fmt.Errorf("%w: --source and --instrument need --plan", errUsage)
	}
	settings.Star.RA, settings.Star.Dec = o.ra, o.dec
	if o.offset != "" {
		settings.Time.Offset = o.offset
	}
	if command.Flags().Changed("longitude") {
		settings.Site = &epochs.Site{Name: "the command line's site", LongitudeDeg: o.longitude, LatitudeDeg: o.latitude, HeightM: o.height}
	}
	if settings.Time.Form == "" && o.sourceName == "" {
		return nil, fmt.Errorf("%w: in which form are the stamps? Give --form, or --plan and --source", errUsage)
	}
	return harmonize.NewStamps(settings)
}
