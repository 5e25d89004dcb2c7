package review

import (
	"html"
	"strings"
)

// plainHTML is the text of a page of HTML, a line for each block and a tab
// between the cells of a row. Styles, scripts, drawings and references to
// footnotes are left out. Tags are taken out by their angle brackets alone,
// which is enough for the page that a report writes, and harms no other.
func plainHTML(page string) []string {
	var b strings.Builder
	for page != "" {
		text, rest, tagged := strings.Cut(page, "<")
		b.WriteString(strings.Join(strings.Fields(" "+text+" "), " "))
		if !tagged {
			break
		}
		if strings.HasSuffix(text, " ") || strings.HasSuffix(text, "\n") {
			b.WriteByte(' ')
		}
		tag, after, _ := strings.Cut(rest, ">")
		name := strings.ToLower(tag)
		if at := strings.IndexAny(name, " \t\n/"); at > 0 {
			name = name[:at]
		}
		page = after
		switch name {
		case "style", "script", "svg", "sup":
			if end := strings.Index(page, "</"+name); end >= 0 {
				page = page[end:]
			} else {
				page = ""
			}
		case "/th", "/td":
			b.WriteByte('\t')
		case "/p", "/tr", "/caption", "/h1", "/h2", "/h3", "/h4", "/li", "/div", "br", "/title", "/figcaption", "/table", "/pre":
			b.WriteByte('\n')
		}
		if strings.HasPrefix(page, " ") || strings.HasPrefix(page, "\n") {
			b.WriteByte(' ')
		}
	}
	lines := strings.Split(html.UnescapeString(b.String()), "\n")
	for i, l := range lines {
		lines[i] = strings.TrimRight(strings.TrimLeft(l, " "), "\t ")
	}
	return lines
}
