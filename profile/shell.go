package profile

import "strings"

// ShellWord is a text as one word of a command line in a shell: as it stands
// where it has only letters, digits and signs that no shell reads, and else between
// single quotes, in which nothing is read (POSIX.1-2017, Shell Command Language,
// 2.2.2). What comes from a file must not run when a hint is pasted.
func ShellWord(text string) string {
	safe := func(r rune) bool {
		return r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r >= '0' && r <= '9' || strings.ContainsRune("_-./=:,@%+", r)
	}
	if text != "" && strings.TrimFunc(text, safe) == "" {
		return text
	}
	return "'" + strings.ReplaceAll(text, "'", `'\''`) + "'"
}
