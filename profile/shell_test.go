package profile

import "testing"

// The quoted forms are those of the POSIX shell: inside single quotes every
// character stands for itself, and a single quote is written '\”.
func TestShellWord(t *testing.T) {
	for text, want := range map[string]string{
		"Vs=DTS":               "Vs=DTS",
		"Vs=DTS [us/ft]":       "'Vs=DTS [us/ft]'",
		"":                     "''",
		"Vs=$HOME `id`":        "'Vs=$HOME `id`'",
		"top=L'Aquila; rm":     `'top=L'\''Aquila; rm'`,
		"a b\\":                `'a b\'`,
		"a$(id)b":              "'a$(id)b'",
		"Vs=Geschwindigkeit ü": "'Vs=Geschwindigkeit ü'",
	} {
		if got := ShellWord(text); got != want {
			t.Errorf("ShellWord(%q) = %s, want %s", text, got, want)
		}
	}
}
