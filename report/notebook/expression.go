package notebook

import (
	"errors"
	"fmt"
	"maps"
	"math"
	"reflect"
	"regexp"
	"slices"
	"strings"

	"github.com/expr-lang/expr"
	"github.com/expr-lang/expr/file"

	"shearbook/profile"
)

// An expression stands in {{ … }} in prose or in a calc working. It is read
// by a general expression language over a closed set of names: no input, no
// output, no loops, and no more than maxNodes parts.
const (
	maxNodes      = 500
	maxExpression = 2000 // bytes
)

// literal finds a number with its unit in an expression: 30 m, 1200 ft/s.
var literal = regexp.MustCompile(`(^|[^\w.])(\d+(?:\.\d+)?(?:[eE][-+]?\d+)?)\s*(km/s|m/s|ft/s|m|ft|s|kPa|psf)(?:$|\b)`)

// quoted splits an expression at its strings, which literal leaves alone.
var quoted = regexp.MustCompile(`"[^"]*"|'[^']*'`)

// withUnits rewrites each number with a unit as a call of quantity.
func withUnits(source string) string {
	var out strings.Builder
	last := 0
	rewrite := func(s string) string {
		return literal.ReplaceAllString(s, `${1}quantity(${2}, "${3}")`)
	}
	for _, m := range quoted.FindAllStringIndex(source, -1) {
		out.WriteString(rewrite(source[last:m[0]]))
		out.WriteString(source[m[0]:m[1]])
		last = m[1]
	}
	out.WriteString(rewrite(source[last:]))
	return out.String()
}

// scope is the names an expression may use.
type scope map[string]any

// evaluate returns the value of an expression: a Quantity, a string or a
// bool.
func (names scope) evaluate(source string) (any, error) {
	if len(source) > maxExpression {
		return nil, fmt.Errorf("the expression is longer than %d bytes", maxExpression)
	}
	env := make(map[string]any, len(names))
	for k, v := range names {
		env[k] = v
	}
	program, err := expr.Compile(withUnits(source), append(functions(names), expr.Env(env))...)
	if err != nil {
		return nil, plainError(err)
	}
	v, err := expr.Run(program, env)
	if err != nil {
		return nil, plainError(err)
	}
	return asResult(v)
}

// asResult takes what an expression returned for one of the few kinds that
// can be printed.
func asResult(v any) (any, error) {
	switch v := v.(type) {
	case Quantity:
		return v, usable(v)
	case float64:
		return finite(v)
	case int:
		return number(float64(v)), nil
	case string, bool:
		return v, nil
	case nil:
		return nil, errors.New("the expression has no value")
	}
	return nil, fmt.Errorf("the expression gives a %T, which cannot be printed", v)
}

func finite(v float64) (any, error) {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return nil, errors.New("the expression has no finite value")
	}
	return number(v), nil
}

// plainError takes the first line of what the expression language says; the
// lines below it draw the place in its own rewriting of the source.
func plainError(err error) error {
	var fe *file.Error
	if errors.As(err, &fe) {
		return errors.New(ours.Replace(fe.Message))
	}
	text, _, _ := strings.Cut(err.Error(), "\n")
	return errors.New(text)
}

// arithmetic and order are the operators that quantities know beside the
// expression language's own for plain numbers.
var (
	arithmetic = []struct {
		sign, name string
		of         func(a, b Quantity) (Quantity, error)
	}{
		{"+", "addQuantities", add},
		{"-", "subtractQuantities", subtract},
		{"*", "multiplyQuantities", multiply},
		{"/", "divideQuantities", divide},
	}
	order = []struct {
		sign, name string
		holds      func(a, b float64) bool
	}{
		{"<", "less", func(a, b float64) bool { return a < b }},
		{"<=", "lessOrEqual", func(a, b float64) bool { return a <= b }},
		{">", "greater", func(a, b float64) bool { return a > b }},
		{">=", "greaterOrEqual", func(a, b float64) bool { return a >= b }},
	}
)

// ours words the expression language's messages for people who do not know
// Go.
var ours = strings.NewReplacer("type notebook.Results", "a profile", "notebook.Quantity", "a number with a unit")

// functions are all that an expression can call.
func functions(names scope) []expr.Option {
	options := []expr.Option{
		expr.DisableAllBuiltins(),
		expr.MaxNodes(maxNodes),
		expr.Function("quantity", quantityOf, new(func(int, string) Quantity), new(func(float64, string) Quantity)),
		expr.Function("number", inUnit, new(func(Quantity, string) Quantity)),
		expr.Function("round", round, new(func(Quantity, int) Quantity), new(func(float64, int) Quantity)),
		expr.Function("profile", names.profile, new(func(string) Results)),
		unary("sqrt", math.Sqrt), unary("ln", math.Log), unary("exp", math.Exp), unary("log10", math.Log10),
		extreme("min", func(a, b float64) bool { return a < b }),
		extreme("max", func(a, b float64) bool { return a > b }),
	}
	for _, o := range arithmetic {
		options = append(options, expr.Operator(o.sign, o.name), binary(o.name, o.of))
	}
	for _, o := range order {
		options = append(options, expr.Operator(o.sign, o.name), compare(o.name, o.holds))
	}
	return options
}

// binary makes an operator of quantities known for quantities and plain
// numbers on either side.
func binary(name string, f func(a, b Quantity) (Quantity, error)) expr.Option {
	return expr.Function(name, func(p ...any) (any, error) {
		return f(toQuantity(p[0]), toQuantity(p[1]))
	},
		new(func(Quantity, Quantity) Quantity),
		new(func(Quantity, float64) Quantity), new(func(float64, Quantity) Quantity),
		new(func(Quantity, int) Quantity), new(func(int, Quantity) Quantity))
}

func compare(name string, holds func(a, b float64) bool) expr.Option {
	return expr.Function(name, func(p ...any) (any, error) {
		a, b := toQuantity(p[0]), toQuantity(p[1])
		if err := usable(a, b); err != nil {
			return nil, err
		}
		if !a.like(b) {
			return nil, fmt.Errorf("%s and %s cannot be compared: the units do not agree", a.Print(SI), b.Print(SI))
		}
		return holds(a.Value, b.Value), nil
	},
		new(func(Quantity, Quantity) bool),
		new(func(Quantity, float64) bool), new(func(float64, Quantity) bool),
		new(func(Quantity, int) bool), new(func(int, Quantity) bool))
}

// unary makes a function of a plain number known.
func unary(name string, f func(float64) float64) expr.Option {
	return expr.Function(name, func(p ...any) (any, error) {
		q := toQuantity(p[0])
		if err := usable(q); err != nil {
			return nil, err
		}
		if name == "sqrt" && q.M%2 == 0 && q.S%2 == 0 && q.P%2 == 0 {
			q.Value, q.M, q.S, q.P, q.Decimals = math.Sqrt(q.Value), q.M/2, q.S/2, q.P/2, -1
		} else if q.pure() {
			q.Value, q.Decimals = f(q.Value), -1
		} else {
			return nil, fmt.Errorf("%s of %s: a plain number is needed", name, q.Print(SI))
		}
		if _, err := finite(q.Value); err != nil {
			return nil, err
		}
		return q, nil
	}, new(func(Quantity) Quantity), new(func(float64) Quantity), new(func(int) Quantity))
}

// extreme makes min or max known, for two or more values of one dimension.
func extreme(name string, better func(a, b float64) bool) expr.Option {
	return expr.Function(name, func(p ...any) (any, error) {
		if len(p) == 0 {
			return nil, fmt.Errorf("%s needs at least one value", name)
		}
		best := toQuantity(p[0])
		for _, x := range p {
			q := toQuantity(x)
			if err := usable(q); err != nil {
				return nil, err
			}
			if !q.like(best) {
				return nil, fmt.Errorf("%s of %s and %s: the units do not agree", name, best.Print(SI), q.Print(SI))
			}
			if better(q.Value, best.Value) {
				best = q
			}
		}
		return best, nil
	}, new(func(...any) Quantity))
}

func toQuantity(v any) Quantity {
	switch v := v.(type) {
	case Quantity:
		return v
	case float64:
		return number(v)
	case int:
		return number(float64(v))
	}
	return missing(fmt.Sprintf("%v is not a number", v))
}

func quantityOf(p ...any) (any, error) {
	return makeQuantity(toQuantity(p[0]).Value, p[1].(string))
}

// makeQuantity returns v of a unit as a Quantity.
func makeQuantity(v float64, unit string) (Quantity, error) {
	if unit == "s" {
		return seconds(v), nil
	}
	if u, ok := profile.ParseUnit(unit, profile.Length); ok {
		return metres(v * u.Factor), nil
	}
	if u, ok := profile.ParseUnit(unit, profile.Velocity); ok {
		return metresPerSecond(v * u.Factor), nil
	}
	if u, ok := profile.ParseUnit(unit, profile.Stress); ok {
		return Quantity{Value: v * u.Factor, P: 1, Decimals: 1}, nil
	}
	return Quantity{}, fmt.Errorf("%q is not a unit shearbook knows", unit)
}

// inUnit returns the plain number of a quantity in a unit.
func inUnit(p ...any) (any, error) {
	q, unit := p[0].(Quantity), p[1].(string)
	one, err := makeQuantity(1, unit)
	if err != nil {
		return nil, err
	}
	if err := usable(q); err != nil {
		return nil, err
	}
	if !q.like(one) {
		return nil, fmt.Errorf("%s cannot be given in %s", q.Print(SI), unit)
	}
	return Quantity{Value: q.Value / one.Value, Decimals: -1, Notes: q.Notes}, nil
}

func round(p ...any) (any, error) {
	q, n := toQuantity(p[0]), p[1].(int)
	if n < 0 || n > 9 {
		return nil, errors.New("round keeps 0 to 9 decimals")
	}
	q.Decimals = n
	return q, nil
}

// profile returns the results of a profile whose name is not a plain word.
func (names scope) profile(p ...any) (any, error) {
	name := p[0].(string)
	if r, ok := names[name].(Results); ok {
		return r, nil
	}
	return nil, fmt.Errorf("no profile is named %q", name)
}

// unknownName and unknownField are how the expression language says that a
// name is not known.
var (
	unknownName  = regexp.MustCompile(`unknown name (\S+)`)
	unknownField = regexp.MustCompile(`has no field (\S+)`)
)

// nameHint suggests the name that an expression may have meant.
func (ev *evaluation) nameHint(err error) string {
	if m := unknownField.FindStringSubmatch(err.Error()); m != nil {
		return suggest(m[1], resultNames())
	}
	if m := unknownName.FindStringSubmatch(err.Error()); m != nil {
		return suggest(m[1], slices.Sorted(maps.Keys(ev.scope())))
	}
	return ""
}

// resultNames are the names of what an expression can say of a profile.
func resultNames() []string {
	var names []string
	for field := range reflect.TypeFor[Results]().Fields() {
		names = append(names, field.Tag.Get("expr"))
	}
	return names
}
