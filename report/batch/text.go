package batch

import (
	"math"
	"strconv"
	"strings"

	"shearbook/profile"
)

// appendRow adds a row of summary.csv. It does not allocate.
func appendRow(b []byte, r *Row) []byte {
	return appendRest(append(appendCell(b, r.File), ','), r)
}

// appendRest adds what stands in a row behind the file.
func appendRest(b []byte, r *Row) []byte {
	b = append(appendWhole(b, r.Line), ',')
	b = append(appendCell(b, r.Profile), ',')
	b = append(appendCell(b, r.Code), ',')
	b = append(appendCell(b, r.Class), ',')
	b = append(appendCell(b, r.Route), ',')
	b = append(appendKnown(b, r.Velocity, 1), ',')
	b = append(appendKnown(b, r.Depth, 2), ',')
	b = append(appendKnown(b, r.Vs30, 1), ',')
	if r.DepthReached > 0 || r.Class != "" {
		b = appendRounded(b, r.DepthReached, 2)
	}
	b = append(b, ',')
	if r.Class != "" {
		b = appendRounded(b, r.Datum, 2)
	}
	b = append(b, ',')
	b = append(appendCell(b, r.Basis), ',')
	b = append(appendCell(b, r.Standing), ',')
	b = append(appendCell(b, r.ToClass), ',')
	if r.ToClass != "" {
		b = appendRounded(b, r.Margin, 1)
	}
	b = append(b, ',')
	b = append(r.Flags.append(b), ',')
	b = append(appendDigits(b, uint64(r.Notes)), ',')
	b = append(appendDigits(b, uint64(r.Faults)), ',')
	p := &r.Position
	if *p == (profile.Position{}) && r.Problem == "" && r.Report == "" { // as nearly all
		return append(b, ",,,,,,\n"...)
	}
	b = append(appendPosition(b, p), ',')
	b = append(appendCell(b, r.Problem), ',')
	return append(appendCell(b, r.Report), '\n')
}

// appendPosition adds the cells of a position.
func appendPosition(b []byte, p *profile.Position) []byte {
	for _, x := range [...]profile.Optional{p.Latitude, p.Longitude, p.Easting, p.Northing} {
		if x.Known {
			b = strconv.AppendFloat(b, x.Value, 'f', -1, 64)
		}
		b = append(b, ',')
	}
	return appendWhole(b, p.EPSG)
}

// appendFault adds a row of faults.csv.
func appendFault(b []byte, f *Fault) []byte {
	b = append(appendCell(b, f.Severity), ',')
	b = append(appendCell(b, f.Place.File), ',')
	b = append(appendWhole(b, f.Place.Line), ',')
	b = append(appendWhole(b, f.Place.Column), ',')
	b = append(appendCell(b, f.Place.Cell), ',')
	b = append(appendCell(b, f.Profile), ',')
	b = append(appendCell(b, f.Code), ',')
	b = append(appendCell(b, f.ID), ',')
	b = append(appendCell(b, f.Text), ',')
	return append(appendCell(b, f.Hint), '\n')
}

// header is the first line of a table.
func header(columns []Column) []byte {
	var b []byte
	for i := range columns {
		if i > 0 {
			b = append(b, ',')
		}
		b = append(b, columns[i].Name...)
	}
	return append(b, '\n')
}

// append adds the words of the flags.
func (f Flags) append(b []byte) []byte {
	first := true
	for i, word := range FlagWords {
		if f&(1<<i) == 0 {
			continue
		}
		if !first {
			b = append(b, ' ')
		}
		b, first = append(b, word...), false
	}
	return b
}

// appendCell adds a cell, quoted where it has to be (RFC 4180).
func appendCell[T string | []byte](b []byte, text T) []byte {
	if !quoted(text) {
		return append(b, text...)
	}
	b = append(b, '"')
	for i := range len(text) {
		if text[i] == '"' {
			b = append(b, '"')
		}
		b = append(b, text[i])
	}
	return append(b, '"')
}

func quoted[T string | []byte](text T) bool {
	for i := range len(text) {
		if special[text[i]] {
			return true
		}
	}
	return len(text) > 0 && (text[0] == ' ' || text[len(text)-1] == ' ')
}

// special are the characters that a cell must be quoted for.
var special = [256]bool{',': true, '"': true, '\n': true, '\r': true}

// appendWhole adds a number that counts from 1, nothing for 0.
func appendWhole(b []byte, n int) []byte {
	if n == 0 {
		return b
	}
	return appendDigits(b, uint64(n))
}

// appendDigits adds a whole number. What package strconv does takes twice as long
// for numbers of a few digits, of which a table has some ten in each row.
func appendDigits(b []byte, n uint64) []byte {
	switch {
	case n >= 1e8:
		return strconv.AppendUint(b, n, 10)
	case n >= 1e4:
		return appendFourDigits(appendDigits(b, n/1e4), uint32(n%1e4))
	}
	switch k := uint32(n); {
	case k >= 1000:
		return appendFourDigits(b, k)
	case k >= 100:
		return append(b, byte('0'+k/100), byte('0'+k/10%10), byte('0'+k%10))
	case k >= 10:
		return append(b, byte('0'+k/10), byte('0'+k%10))
	default:
		return append(b, byte('0'+k))
	}
}

func appendFourDigits(b []byte, k uint32) []byte {
	return append(b, byte('0'+k/1000), byte('0'+k/100%10), byte('0'+k/10%10), byte('0'+k%10))
}

// appendKnown adds a number that is not 0, nothing for 0.
func appendKnown(b []byte, x float64, decimals int) []byte {
	if x == 0 {
		return b
	}
	return appendRounded(b, x, decimals)
}

// appendRounded adds a number rounded to at most so many decimals, without
// zeros at its end: what strconv.FormatFloat(x, 'f', decimals, 64) gives, only
// faster where the digits are beyond doubt.
func appendRounded(b []byte, x float64, decimals int) []byte {
	scaled := math.Abs(x)*[...]float64{1, 10, 100}[decimals] + 0.5
	if !(scaled < 1e9) {
		return appendTrimmed(b, strconv.FormatFloat(x, 'f', decimals, 64))
	}
	n := uint32(scaled)
	if part := scaled - float64(n); part < 1e-4 || part > 1-1e-4 {
		return appendTrimmed(b, strconv.FormatFloat(x, 'f', decimals, 64))
	}
	if n == 0 {
		return append(b, '0')
	}
	if x < 0 {
		b = append(b, '-')
	}
	switch decimals {
	case 2:
		b, n = appendDigits(b, uint64(n/100)), n%100
		switch {
		case n == 0:
			return b
		case n%10 != 0:
			return append(b, '.', byte('0'+n/10), byte('0'+n%10))
		}
		return append(b, '.', byte('0'+n/10))
	case 1:
		b, n = appendDigits(b, uint64(n/10)), n%10
		if n == 0 {
			return b
		}
		return append(b, '.', byte('0'+n))
	}
	return appendDigits(b, uint64(n))
}

func appendTrimmed(b []byte, text string) []byte {
	if strings.Contains(text, ".") {
		text = strings.TrimRight(strings.TrimRight(text, "0"), ".")
	}
	if text == "-0" {
		text = "0"
	}
	return append(b, text...)
}
