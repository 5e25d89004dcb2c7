package delimited

import (
	"bufio"
	"cmp"
	"encoding/csv"
	"fmt"
	"io"
	"strconv"
	"strings"
	"unicode"

	"shearbook/profile"
)

// Write writes profiles as a table that Read reads back: comma-separated, in
// UTF-8, lengths in m and velocities in m/s, a column for each optional
// quantity that any layer states, and above the header what is known of the
// survey. What is the same for all profiles is written once. Numbers have the
// fewest digits that give the same value again. What a profile says of the
// file it was read from, and its notes, are not written; see Losses.
//
// The error is that of w; or it names a profile that Read would refuse: one
// that profile.Validate finds faulty, or whose name is blank, not plain text
// or that of another.
func Write(w io.Writer, profiles []profile.Profile) error { return write(w, profiles, ',') }

// WriteTabs writes what Write does with tabs between the cells.
func WriteTabs(w io.Writer, profiles []profile.Profile) error { return write(w, profiles, '\t') }

func write(w io.Writer, profiles []profile.Profile, separator rune) error {
	l, err := Lay(profiles)
	if err != nil {
		return err
	}
	buffered := bufio.NewWriter(w)
	for _, line := range l.Lines {
		writeLine(buffered, line)
	}
	table := csv.NewWriter(buffered)
	table.Comma = separator
	table.Write(l.Headings) // its error is kept for Error
	record := make([]string, len(l.Headings))
	err = l.Rows(func(cells []Cell) error {
		for i := range cells {
			record[i] = cells[i].String()
		}
		return table.Write(record)
	})
	table.Flush()
	if err = cmp.Or(err, table.Error()); err != nil {
		return err
	}
	return buffered.Flush()
}

func writable(profiles []profile.Profile) error {
	names := map[string]bool{}
	for i := range profiles {
		p := &profiles[i]
		switch {
		case p.Name == "" || p.Name != oneLine(p.Name):
			return fmt.Errorf("the name %s of profile %d is blank or not one line of plain text", quote(p.Name), i+1)
		case names[p.Name]:
			return fmt.Errorf("two profiles have the name %s", quote(p.Name))
		case p.NoVelocity != profiles[0].NoVelocity:
			return fmt.Errorf("profile %s and profile %s cannot share a table: only one of them states velocities", quote(p.Name), quote(profiles[0].Name))
		}
		names[p.Name] = true
		if faults := profile.Validate(p); len(faults) > 0 {
			return fmt.Errorf("profile %s: %w", quote(p.Name), faults)
		}
	}
	return nil
}

// digits is a number with the fewest digits that give it again.
func digits(x float64) string {
	if x != 0 && (x < 1e-6 || x >= 1e15) {
		return strconv.FormatFloat(x, 'e', -1, 64)
	}
	return strconv.FormatFloat(x, 'f', -1, 64)
}

// oneLine is text without line ends, characters that cannot be printed, and
// blanks at its ends or side by side.
func oneLine(text string) string {
	text = strings.Map(func(r rune) rune {
		if r == '\u007f' || r < ' ' && !unicode.IsSpace(r) {
			return -1
		}
		return r
	}, strings.ToValidUTF8(text, "\ufffd"))
	return strings.Join(strings.Fields(text), " ")
}

// writeLine writes one line above the header, quoted where it would not come
// back as it is.
func writeLine(w *bufio.Writer, l Line) {
	line := "# " + l.Scope() + ": " + l.Value
	if strings.ContainsAny(line, `",;`) {
		line = `"` + strings.ReplaceAll(line, `"`, `""`) + `"`
	}
	w.WriteString(line + "\n") // its error is kept for Flush
}
