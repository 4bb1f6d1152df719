package bundle

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"strconv"
)

// csvTable gathers the rows of one file.
type csvTable struct {
	buffer bytes.Buffer
	writer *csv.Writer
	width  int
}

func newCSV(header ...string) *csvTable {
	t := &csvTable{width: len(header)}
	t.writer = csv.NewWriter(&t.buffer)
	t.add(header...)
	return t
}

// add appends a row, which must be as wide as the header.
func (t *csvTable) add(cells ...string) {
	if len(cells) != t.width {
		panic(fmt.Sprintf("bundle: a row of %d cells under a header of %d", len(cells), t.width))
	}
	if err := t.writer.Write(cells); err != nil {
		panic("bundle: writing to memory failed: " + err.Error())
	}
}

func (t *csvTable) bytes() []byte {
	t.writer.Flush()
	return t.buffer.Bytes()
}

// kms writes km/s to a millimetre per second, finer than any error.
func kms(v float64) string { return fixed(v, 6) }

// fixed writes v with a number of decimals and no negative zero.
func fixed(v float64, decimals int) string {
	text := strconv.FormatFloat(v, 'f', decimals, 64)
	if zero := strconv.FormatFloat(0, 'f', decimals, 64); text == "-"+zero {
		return zero
	}
	return text
}

// orEmpty writes v as text, or nothing when it is zero.
func orEmpty(v float64, write func(float64) string) string {
	if v == 0 {
		return ""
	}
	return write(v)
}

func significant(v float64) string { return strconv.FormatFloat(v, 'e', 6, 64) }

func yesNo(yes bool) string {
	if yes {
		return "yes"
	}
	return "no"
}
