package codefile

import (
	"math/rand/v2"
	"os"
	"strings"
	"testing"
)

// TestShuffledTables puts values of the example in place of others, and values
// that people might write, and holds each table that is still read to what
// FuzzRead asks of it: a class for every site, and the same table when it is
// written and read again.
func TestShuffledTables(t *testing.T) {
	data, err := os.ReadFile(exampleFile)
	if err != nil {
		t.Fatal(err)
	}
	lines, values := bare(string(data))
	values = append(values, `"to 900"`, `"> 450"`, `"<= 900"`, `"about 3 to 5 m"`, `">= 0 m"`, "yes", "no", "~", "''", "[R, F]", "[R, L]", "[]", "{}",
		"geometry", "stiff ground", "rock barred", "checked", "from memory", "average over the soil", "ground described in words", "soft clay", "1", "0", "1000 m", "ft/s", "[N, su]")
	random := rand.New(rand.NewPCG(25, 7))
	const draws = 2_000
	read := 0
	for range draws {
		text := shuffled(random, lines, values)
		c, err := Read("t.yaml", []byte(text))
		if err != nil {
			continue
		}
		read++
		settles(t, c)
		travels(t, c)
		if t.Failed() {
			t.Fatalf("the table:\n%s", text)
		}
	}
	if read < draws/50 {
		t.Errorf("only %d of %d tables are read", read, draws)
	}
}

// bare returns the lines of a file without its comments, and the values that
// stand in them.
func bare(text string) (lines, values []string) {
	for line := range strings.Lines(text) {
		if content := strings.TrimSpace(line); content == "" || strings.HasPrefix(content, "#") {
			continue
		}
		lines = append(lines, line)
		if _, value, found := strings.Cut(line, ": "); found && !strings.HasPrefix(value, "{") {
			values = append(values, strings.TrimSpace(value))
		}
	}
	return lines, values
}

// shuffled leaves out a line, doubles one, or gives some another value.
func shuffled(random *rand.Rand, lines, values []string) string {
	out := append([]string{}, lines...)
	for range 1 + random.IntN(3) {
		i := random.IntN(len(out))
		key, value, found := strings.Cut(out[i], ": ")
		other := values[random.IntN(len(values))]
		switch {
		case random.IntN(6) == 0:
			out = append(out[:i], out[i+1:]...)
		case random.IntN(12) == 0:
			out = append(out[:i], append([]string{out[i]}, out[i:]...)...)
		case found && strings.Count(value, `"`) > 2: // limits: one of them
			parts := strings.Split(value, `"`)
			parts[1+2*random.IntN(len(parts)/2)] = strings.Trim(other, `"`)
			out[i] = key + ": " + strings.Join(parts, `"`)
		case found:
			out[i] = key + ": " + other + "\n"
		}
	}
	return strings.Join(out, "")
}
