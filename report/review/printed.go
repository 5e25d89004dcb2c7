package review

import (
	"cmp"
	"fmt"
	"maps"
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"

	"shearbook/profile"
)

// Printed is a piece of the text of a report: a Markdown file, or a page of a
// PDF.
type Printed struct {
	File string
	Page int      // from 1; 0 of a file without pages
	Text []string // lines
}

// MaxPrinted is the longest text of a report that is looked at, in bytes.
const MaxPrinted = 8 << 20

// word is one word of a report's text without the marks of Markdown.
type word struct {
	text string
	line int
}

// wordsOf cuts a text into its words. Emphasis, the bars of tables and
// references to footnotes are left out.
func (p *Printed) words() []word {
	var out []word
	for i, line := range p.Text {
		for field := range strings.FieldsSeq(line) {
			if at := strings.Index(field, "[^"); at >= 0 {
				field = field[:at]
			}
			field = strings.Trim(field, "*_|`()")
			if field != "" {
				out = append(out, word{field, i + 1})
			}
		}
	}
	return out
}

// place is where a word stands.
func (p *Printed) place(w word) Place {
	if p.Page > 0 {
		return Place{Place: profile.Place{File: p.File}, Page: p.Page}
	}
	return Place{Place: profile.Place{File: p.File, Line: w.line}}
}

// textDiffers holds the text of a report against its results.json: what it
// states as an answer.
func textDiffers(x *examination) { x.text(true) }

// textMentions holds against it what the text says in passing.
func textMentions(x *examination) { x.text(false) }

func (x *examination) text(answers bool) {
	if len(x.Printed) == 0 || len(x.Results) == 0 {
		return
	}
	known, averages, values := x.knownClasses(), x.averages(), x.values()
	for from := 0; from < len(x.Printed); {
		to := from // the pieces of one file follow each other
		in := &inText{answers: answers, known: known, velocities: map[string]Number{}, labelled: map[string]bool{},
			classes: map[string]int{}, words: map[string]bool{}, averages: averages, values: values, bound: x.bindings(!answers)}
		for ; to < len(x.Printed) && x.Printed[to].File == x.Printed[from].File; to++ {
			x.read(in, &x.Printed[to])
		}
		if answers {
			x.unprinted(in, x.Printed[from].File)
		}
		from = to
	}
}

// inText is what was read in the text of a report.
type inText struct {
	answers    bool
	known      map[string]bool   // classes of the codes
	velocities map[string]Number // by their texts
	labelled   map[string]bool   // texts of those that stand as averages
	classes    map[string]int    // how often each is named
	words      map[string]bool   // all that are short
	averages   string            // the first few of results.json
	values     []float64         // m/s, every average of results.json, sorted
	bound      *bindings
}

// Limits of what is compared of a text.
const (
	maxVelocities = 20_000 // different ones
	maxSame       = 10     // findings on one class
	longestClass  = 20     // bytes of a word that may be a class
)

// read goes through one piece of text.
func (x *examination) read(in *inText, p *Printed) {
	words := p.words()
	in.bound.bind(p)
	for k, w := range words {
		if len(w.text) <= longestClass {
			text := strings.TrimRight(w.text, ".,;:")
			in.words[text] = true
			if class, ok := p.knownClass(text, in.known); ok {
				in.words[class] = true
			}
		}
		if in.answers {
			x.readCell(in, w.text)
		}
		if class, ok := classAt(p, words, k, in.known); ok {
			in.classes[class]++
			if in.classes[class] <= maxSame && in.answers == p.isAnswer(words, k) && !x.claimsClass(class) && !in.bound.told[w.line] {
				x.add(p.place(w), in.what()+" names a site class that results.json gives nowhere", "class "+class, "class "+strings.Join(x.claimedClasses(), ", "))
			}
		}
		if n, ok := velocityAt(words, k); ok {
			x.readVelocity(in, p, words, k, n)
		}
	}
}

// readVelocity notes a velocity, and tells one that stands as an average and
// is none.
func (x *examination) readVelocity(in *inText, p *Printed, words []word, k int, n Number) {
	if len(in.velocities) < maxVelocities {
		in.velocities[n.Text] = n
	}
	answer, ok := labelled(words, k)
	if !ok || answer != in.answers || in.labelled[n.Text] || len(in.labelled) == maxVelocities || in.bound.told[words[k].line] {
		return
	}
	in.labelled[n.Text] = true
	from, _ := slices.BinarySearch(in.values, n.Value-2*n.Half)
	if !among(in.values[from:], n) {
		x.add(p.place(words[k]), in.what()+" prints an average that results.json gives nowhere", n.Text, in.averages)
	}
}

// what is what is compared: the answers of the text, or its prose.
func (in *inText) what() string {
	if in.answers {
		return "the text"
	}
	return "the prose"
}

// readCell notes a bare number below a heading of averages.
func (x *examination) readCell(in *inText, text string) {
	unit := in.bound.average
	if first, _ := utf8.DecodeRuneInString(text); unit.Name == "" || !unicode.IsDigit(first) || len(text) > longestClass {
		return
	}
	n, err := printed(strings.ReplaceAll(text, ",", ""), unit)
	if err == nil && len(in.velocities) < maxVelocities {
		in.velocities[n.Text] = n
	}
}

// isAnswer reports whether the class at word k stands as an answer of the
// report, in the row of a summary's box; prose may name other classes for
// comparison. On a page the box has another form; see bindings.
func (p *Printed) isAnswer(words []word, k int) bool {
	return p.Page == 0 && words[k].text == "Site" && strings.ContainsAny(p.Text[words[k].line-1], "|\t") && (k == 0 || words[k-1].line != words[k].line)
}

// among reports whether a number stands for one of the values, which are
// sorted and not below it by more than its rounding.
func among(values []float64, n Number) bool {
	for _, v := range values {
		if n.Means(v, 0) {
			return true
		}
		if v > n.Value+2*n.Half {
			return false
		}
	}
	return false
}

// unprinted tells the results that the text does not print.
func (x *examination) unprinted(in *inText, file string) {
	velocities := slices.SortedFunc(maps.Values(in.velocities), func(a, b Number) int { return cmp.Compare(a.Value, b.Value) })
	for i := range x.Results {
		r := &x.Results[i]
		if r.Average.Known() && !prints(velocities, r.Average.Value) {
			x.add(r.Place, "the text of "+file+" prints the average of this result nowhere", r.Average.in(r.Average.Value), "")
		}
		if class := plainClass(r.Class); r.Class != "" && in.classes[class] == 0 && !in.words[r.Class] && !strings.ContainsRune(r.Class, ' ') {
			x.add(r.Place, "the text of "+file+" prints the class of this result nowhere", "class "+r.Class, "")
		}
	}
}

// prints reports whether one of the velocities, in their order, is a value as
// it is printed. A velocity is printed to 10 m/s at least.
func prints(velocities []Number, v float64) bool {
	const coarsest = 10 // m/s
	from, _ := slices.BinarySearchFunc(velocities, v-coarsest, func(n Number, at float64) int { return cmp.Compare(n.Value, at) })
	for _, n := range velocities[from:] {
		if n.Value > v+coarsest {
			break
		}
		if n.Means(v, 0) {
			return true
		}
	}
	return false
}

// averages lists the first few averages of results.json.
func (x *examination) averages() string {
	var list []string
	for _, r := range x.Results {
		if len(list) == maxCauses {
			break
		}
		if text := speed(r.Average.Value); r.Average.Known() && !slices.Contains(list, text) {
			list = append(list, text)
		}
	}
	return strings.Join(list, ", ")
}

// values are the averages of results.json, sorted.
func (x *examination) values() []float64 {
	var list []float64
	for _, r := range x.Results {
		for _, n := range []Number{r.Average, r.Vs30} {
			if n.Known() {
				list = append(list, n.Value)
			}
		}
	}
	slices.Sort(list)
	return list
}

func (x *examination) claimedClasses() []string {
	var list []string
	for _, r := range x.Results {
		if !slices.Contains(list, r.Class) && len(list) < 10 {
			list = append(list, r.Class)
		}
	}
	return list
}

func (x *examination) claimsClass(class string) bool {
	return slices.ContainsFunc(x.Results, func(r Result) bool { return plainClass(r.Class) == class })
}

// knownClasses are the classes of the codes that results.json names.
func (x *examination) knownClasses() map[string]bool {
	known := map[string]bool{}
	for _, r := range x.Results {
		if code := x.desk.find(r.Code); code != nil {
			for _, b := range code.Bands {
				known[plainClass(b.Class)] = true
			}
		}
		known[plainClass(r.Class)] = true
	}
	return known
}

// classAt reads "site class D" at word k.
func classAt(p *Printed, words []word, k int, known map[string]bool) (string, bool) {
	if k+2 >= len(words) || !strings.EqualFold(words[k].text, "site") || !strings.EqualFold(words[k+1].text, "class") {
		return "", false
	}
	text := strings.TrimRight(words[k+2].text, ".,;:*")
	if first, _ := utf8.DecodeRuneInString(text); !unicode.IsUpper(first) {
		return "", false
	}
	return p.knownClass(text, known)
}

// knownClass is the known class that a word names. On a page the numbers of
// footnotes hang on it.
func (p *Printed) knownClass(text string, known map[string]bool) (string, bool) {
	class := plainClass(text)
	if known[class] || p.Page == 0 {
		return class, known[class]
	}
	for end := len(class); end > 0 && strings.IndexByte("0123456789,", class[end-1]) >= 0; end-- {
		if known[class[:end-1]] {
			return class[:end-1], true
		}
	}
	return class, false
}

// velocityAt reads "246.9 m/s" at word k.
func velocityAt(words []word, k int) (Number, bool) {
	if k+1 >= len(words) {
		return Number{}, false
	}
	text := words[k].text
	if first, _ := utf8.DecodeRuneInString(text); !unicode.IsDigit(first) || len(text) > longestNumber {
		return Number{}, false
	}
	unit := strings.TrimRight(words[k+1].text, ".,;:)*")
	for _, u := range []profile.Unit{profile.MetrePerSecond, profile.FootPerSecond} {
		// A footnote of a page hangs on the unit as a number.
		if rest, ok := strings.CutPrefix(unit, u.Name); ok && strings.TrimLeft(rest, "0123456789,)") == "" {
			n, err := printed(strings.ReplaceAll(text, ",", ""), u)
			return n, err == nil
		}
	}
	return Number{}, false
}

// labelled reports whether the velocity at word k stands as an average of the
// report: as an answer in "Average velocity 246.9 m/s", and in prose in "an
// average velocity of 246.9 m/s".
func labelled(words []word, k int) (answer, ok bool) {
	at := k - 1
	prose := at >= 0 && words[at].text == "of"
	if prose {
		at--
	}
	ok = at >= 1 && words[at].text == "velocity" && strings.EqualFold(words[at-1].text, "average")
	return ok && !prose && words[at-1].text == "Average", ok
}

// digests compares every printed digest with its file.
func digests(x *examination) {
	for _, d := range x.Digests {
		f := slices.IndexFunc(x.Files, func(f File) bool { return f.Name == d.File })
		switch {
		case f < 0:
			continue // a file that was not handed in is told where it is needed
		case x.Files[f].SHA256 != strings.ToLower(d.SHA256):
			x.add(d.Place, fmt.Sprintf("the digest printed of %s is not that of the file: one of the two was changed", profile.Quote(d.File)), d.SHA256, x.Files[f].SHA256)
		}
	}
}

// evidenceFaults tells what does not fit together.
func evidenceFaults(x *examination) { x.evidence(false) }

// looseEvidence tells what may not fit together.
func looseEvidence(x *examination) { x.evidence(true) }

func (x *examination) evidence(lesser bool) {
	for _, f := range x.Faults {
		if f.Evidence && f.Lesser == lesser {
			x.add(Place{Place: f.Place, Page: f.Page}, f.Text, f.Claimed, f.Found)
		}
	}
}

// printedDigests finds the digests that a text prints: 64 hexadecimal digits
// in a line, behind the name of a file and its size.
func (p *Printed) digests() []Digest {
	var out []Digest
	for i, line := range p.Text {
		fields := strings.FieldsFunc(line, func(r rune) bool { return r == '|' || r == '\t' || r == '`' })
		for k, field := range fields {
			sum := strings.TrimSpace(field)
			if len(sum) == 64 && strings.Trim(sum, "0123456789abcdefABCDEF") == "" && k > 0 && len(out) < maxDigests {
				out = append(out, Digest{File: unescaped(strings.TrimSpace(fields[0])), SHA256: sum, Place: p.place(word{line: i + 1})})
			}
		}
	}
	return out
}

// maxDigests is how many digests of one text are looked at.
const maxDigests = 10_000

// unescaped takes the backslashes of Markdown out of a file's name.
func unescaped(name string) string {
	var b strings.Builder
	for i := 0; i < len(name); i++ {
		if name[i] == '\\' && i+1 < len(name) && strings.IndexByte("!\"#$%&'()*+,-./:;<=>?@[\\]^_`{|}~", name[i+1]) >= 0 {
			i++
		}
		b.WriteByte(name[i])
	}
	return b.String()
}
