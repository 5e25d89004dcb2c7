package notebook

import (
	"regexp"
	"strings"

	"shearbook/profile"
	"shearbook/report"
)

var calcWorking = Working{
	Summary: "A calculation, one `name = expression` a line, printed with its results; later lines, prose and workings may use the names. " +
		"Numbers take units (30 m, 1200 ft/s, 0.4 s, 100 kPa); a comment behind # is printed beside its line.",
	Example:  "t = 30 m / L1.vs30   # travel time\nT = 4 * t            # period of a uniform column\n",
	evaluate: evaluateCalc,
}

// definition is one line of a calculation.
var definition = regexp.MustCompile(`^\s*([\p{L}][\p{L}\p{N}_]*)\s*=\s*([^=].*)$`)

func evaluateCalc(ev *evaluation, c call) []report.Block {
	t := &report.Table{Columns: []report.TableColumn{column("Name", report.AlignLeft), wide("Working"),
		column("Result", report.AlignRight), column("Remark", report.AlignLeft)}}
	remarks := false
	for i, line := range strings.Split(c.body, "\n") {
		source, remark := cutComment(line)
		if strings.TrimSpace(source) == "" {
			continue
		}
		at := profile.Place{File: ev.nb.File, Line: c.at.Line + 1 + i, Column: 1 + len(line) - len(strings.TrimLeft(line, " \t"))}
		name, expression, value, ok := ev.calculate(at, source)
		if !ok {
			continue
		}
		remarks = remarks || remark != ""
		cells := row(name, expression, "", remark)
		cells.Cells[2] = ev.show(value)
		t.Rows = append(t.Rows, cells)
	}
	if !remarks {
		t.Columns = t.Columns[:3]
		for i := range t.Rows {
			t.Rows[i].Cells = t.Rows[i].Cells[:3]
		}
	}
	if len(t.Rows) == 0 {
		return nil
	}
	return one(t)
}

// cutComment cuts a line at a # outside of quotes.
func cutComment(line string) (source, comment string) {
	quote := rune(0)
	for i, r := range line {
		switch {
		case quote == 0 && r == '#':
			return line[:i], strings.TrimSpace(line[i+1:])
		case quote == 0 && (r == '"' || r == '\''):
			quote = r
		case r == quote:
			quote = 0
		}
	}
	return line, ""
}

// calculate evaluates one line and makes its name known.
func (ev *evaluation) calculate(at profile.Place, source string) (name, expression string, value Quantity, ok bool) {
	parts := definition.FindStringSubmatch(source)
	if parts == nil {
		ev.add(at, "write `name = expression`, as `t = 30 m / L1.vs30`", "%q is not a line of a calculation", strings.TrimSpace(source))
		return "", "", Quantity{}, false
	}
	name, expression = parts[1], strings.TrimSpace(parts[2])
	result, err := ev.scope().evaluate(expression)
	if err != nil {
		ev.add(at, ev.nameHint(err), "%s: %v", name, err)
		return "", "", Quantity{}, false
	}
	value, isNumber := result.(Quantity)
	if !isNumber {
		ev.add(at, "calc gives numbers; use {{ … }} in prose for words", "%s is not a number", name)
		return "", "", Quantity{}, false
	}
	return name, expression, value, ev.defineAt(at, name, value)
}

// define makes a named result known to expressions.
func (ev *evaluation) define(m *mapping, name string, q Quantity) {
	at := m.at(m.get("name"))
	if !definition.MatchString(name + " = 0") {
		ev.add(at, "use letters, digits and _, beginning with a letter", "%q is not a name an expression can use", name)
		return
	}
	ev.defineAt(at, name, q)
}

func (ev *evaluation) defineAt(at profile.Place, name string, q Quantity) bool {
	if _, taken := ev.scope()[name]; taken {
		ev.add(at, "choose another name", "%q is a name already", name)
		return false
	}
	ev.named[name] = q
	return true
}
