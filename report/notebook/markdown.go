package notebook

import (
	"bufio"
	"bytes"
	"fmt"
	stdhtml "html"
	"strings"

	"github.com/yuin/goldmark"
	"github.com/yuin/goldmark/ast"
	"github.com/yuin/goldmark/extension"
	extast "github.com/yuin/goldmark/extension/ast"
	"github.com/yuin/goldmark/parser"
	"github.com/yuin/goldmark/renderer/html"
	"github.com/yuin/goldmark/text"
	"github.com/yuin/goldmark/util"

	"shearbook/report"
)

// maxNesting is how deep lists and quotes of a notebook may nest.
const maxNesting = 40

// parseMarkdown reads CommonMark with tables, task lists, strike-through,
// bare links and footnotes, and {{ … }}.
func parseMarkdown(source []byte) ast.Node {
	md := goldmark.New(
		goldmark.WithExtensions(extension.GFM, extension.Footnote),
		goldmark.WithParserOptions(parser.WithInlineParsers(util.Prioritized(expressionParser{}, 50))),
	)
	return md.Parser().Parse(text.NewReader(source))
}

// expressionNode is {{ … }} in prose.
type expressionNode struct {
	ast.BaseInline
	source string
	offset int // of the first brace
}

var kindExpression = ast.NewNodeKind("Expression")

func (n *expressionNode) Kind() ast.NodeKind { return kindExpression }
func (n *expressionNode) Dump(source []byte, level int) {
	ast.DumpHelper(n, source, level, map[string]string{"source": n.source}, nil)
}

type expressionParser struct{}

func (expressionParser) Trigger() []byte { return []byte{'{'} }

func (expressionParser) Parse(_ ast.Node, block text.Reader, _ parser.Context) ast.Node {
	line, segment := block.PeekLine()
	if !bytes.HasPrefix(line, []byte("{{")) {
		return nil
	}
	end := bytes.Index(line, []byte("}}"))
	if end < 0 {
		return nil
	}
	block.Advance(end + 2)
	return &expressionNode{source: strings.TrimSpace(string(line[2:end])), offset: segment.Start}
}

// converter turns goldmark's open tree into our closed one. A node it does
// not know is a fault at its place, never dropped.
type converter struct {
	*evaluation
	source    []byte
	footnotes map[int]*extast.Footnote // by goldmark's index
	numbers   map[int]int              // goldmark's index to ours
	depth     int
}

// convert returns the blocks of a notebook's body.
func (ev *evaluation) convert(body []byte) []report.Block {
	root := parseMarkdown(body)
	ev.choices(root, body)
	c := &converter{evaluation: ev, source: body, footnotes: map[int]*extast.Footnote{}, numbers: map[int]int{}}
	for n := root.FirstChild(); n != nil; n = n.NextSibling() {
		if list, ok := n.(*extast.FootnoteList); ok {
			for f := list.FirstChild(); f != nil; f = f.NextSibling() {
				c.footnotes[f.(*extast.Footnote).Index] = f.(*extast.Footnote)
			}
		}
	}
	return c.blocks(root)
}

func (c *converter) blocks(parent ast.Node) []report.Block {
	c.depth++
	defer func() { c.depth-- }()
	if c.depth > maxNesting {
		c.refuse(parent, "lists and quotes nest deeper than %d", maxNesting)
		return nil
	}
	var blocks []report.Block
	for n := parent.FirstChild(); n != nil; n = n.NextSibling() {
		blocks = append(blocks, c.block(n)...)
	}
	return blocks
}

func (c *converter) block(n ast.Node) []report.Block {
	switch n := n.(type) {
	case *ast.Heading:
		return one(&report.Heading{Level: n.Level, Inline: c.inlines(n)})
	case *ast.Paragraph:
		if img, ok := lone(n).(*ast.Image); ok {
			return c.image(img)
		}
		return one(&report.Paragraph{Inline: c.inlines(n)})
	case *ast.TextBlock:
		return one(&report.Paragraph{Inline: c.inlines(n)})
	case *ast.ThematicBreak:
		return one(&report.Rule{})
	case *ast.CodeBlock:
		return one(&report.CodeBlock{Text: c.lines(n)})
	case *ast.FencedCodeBlock:
		return c.fence(n)
	case *ast.Blockquote:
		return one(&report.Quote{Blocks: c.blocks(n)})
	case *ast.List:
		return one(c.list(n))
	case *extast.Table:
		return one(c.table(n))
	case *extast.FootnoteList, *ast.LinkReferenceDefinition:
		return nil // reached through its references
	case *ast.HTMLBlock:
		c.refuse(n, "raw HTML does not reach the report")
		return nil
	}
	c.refuse(n, "%s does not reach the report", n.Kind())
	return nil
}

func one(b report.Block) []report.Block { return []report.Block{b} }

// lone returns the only child of a paragraph, nil if it has more.
func lone(n ast.Node) ast.Node {
	if n.ChildCount() == 1 {
		return n.FirstChild()
	}
	return nil
}

// refuse adds a fault at a node's place.
func (c *converter) refuse(n ast.Node, format string, args ...any) {
	c.add(c.nb.at(c.offset(n)), "write it in plain Markdown", format, args...)
}

// offset returns the byte offset of a node, or of the nearest node before or
// above it that has one.
func (c *converter) offset(n ast.Node) int {
	for ; n != nil; n = n.Parent() {
		if n.Pos() >= 0 {
			return n.Pos()
		}
	}
	return -1
}

// lines returns the text of a block of code.
func (c *converter) lines(n ast.Node) string {
	var text strings.Builder
	for i := range n.Lines().Len() {
		segment := n.Lines().At(i)
		text.Write(segment.Value(c.source))
	}
	return text.String()
}

// fence evaluates a working, or passes a block of code through.
func (c *converter) fence(n *ast.FencedCodeBlock) []report.Block {
	info := ""
	if n.Info != nil {
		info = strings.TrimSpace(string(n.Info.Segment.Value(c.source)))
	}
	name, rest, _ := strings.Cut(info, " ")
	body := c.lines(n)
	own, isOwn := c.ownNamed(name)
	working, ok := workings[name]
	if !ok && !isOwn {
		return one(&report.CodeBlock{Language: info, Text: body})
	}
	at := c.nb.at(n.Pos())
	if rest != "" {
		c.add(at, "write keys on lines of their own inside the fence", "working %s has %q beside its name", name, strings.TrimSpace(rest))
	}
	if isOwn {
		return c.evaluateOwn(own, call{name: name, body: body, at: at})
	}
	return working.evaluate(c.evaluation, call{name: name, body: body, at: at})
}

func (c *converter) list(n *ast.List) *report.List {
	list := &report.List{Ordered: n.IsOrdered(), Start: n.Start, Tight: n.IsTight}
	for item := n.FirstChild(); item != nil; item = item.NextSibling() {
		list.Items = append(list.Items, report.ListItem{Task: task(item), Blocks: c.blocks(item)})
	}
	return list
}

// task returns the box of a list item.
func task(item ast.Node) report.Task {
	if first := item.FirstChild(); first != nil {
		if box, ok := first.FirstChild().(*extast.TaskCheckBox); ok {
			if box.IsChecked {
				return report.TaskDone
			}
			return report.TaskOpen
		}
	}
	return report.NoTask
}

func (c *converter) table(n *extast.Table) *report.Table {
	t := &report.Table{}
	for row := n.FirstChild(); row != nil; row = row.NextSibling() {
		var cells [][]report.Inline
		for cell := row.FirstChild(); cell != nil; cell = cell.NextSibling() {
			cells = append(cells, c.inlines(cell))
		}
		if _, ok := row.(*extast.TableHeader); !ok {
			t.Rows = append(t.Rows, report.TableRow{Cells: cells})
			continue
		}
		for i, head := range cells {
			t.Columns = append(t.Columns, report.TableColumn{Header: head, Align: alignment(n.Alignments[i])})
		}
	}
	return t
}

func alignment(a extast.Alignment) report.Align {
	switch a {
	case extast.AlignRight:
		return report.AlignRight
	case extast.AlignCenter:
		return report.AlignCentre
	}
	return report.AlignLeft
}

func (c *converter) inlines(parent ast.Node) []report.Inline {
	c.depth++
	defer func() { c.depth-- }()
	if c.depth > maxNesting {
		c.refuse(parent, "emphasis and links nest deeper than %d", maxNesting)
		return nil
	}
	var out []report.Inline
	for n := parent.FirstChild(); n != nil; n = n.NextSibling() {
		out = append(out, c.inline(n)...)
	}
	return out
}

func (c *converter) inline(n ast.Node) []report.Inline {
	switch n := n.(type) {
	case *ast.Text:
		return c.text(n)
	case *ast.String:
		return []report.Inline{report.Text(n.Value)}
	case *ast.CodeSpan:
		return []report.Inline{report.Code(c.code(n))}
	case *ast.Emphasis:
		if n.Level == 2 {
			return []report.Inline{&report.Strong{Inline: c.inlines(n)}}
		}
		return []report.Inline{&report.Emphasis{Inline: c.inlines(n)}}
	case *extast.Strikethrough:
		return []report.Inline{&report.Strike{Inline: c.inlines(n)}}
	case *ast.Link:
		return []report.Inline{&report.Link{URL: string(n.Destination), Inline: c.inlines(n)}}
	case *ast.AutoLink:
		return []report.Inline{&report.Link{URL: autoLink(n, c.source), Inline: []report.Inline{report.Text(n.Label(c.source))}}}
	case *extast.FootnoteLink:
		return c.footnote(n)
	case *extast.TaskCheckBox, *extast.FootnoteBacklink:
		return nil // part of the item, part of the note
	case *expressionNode:
		return c.expression(n)
	case *ast.Image:
		c.refuse(n, "an image inside a line of text does not reach the report: give it a paragraph of its own")
		return nil
	case *ast.RawHTML:
		c.refuse(n, "raw HTML does not reach the report")
		return nil
	}
	c.refuse(n, "%s does not reach the report", n.Kind())
	return nil
}

func autoLink(n *ast.AutoLink, source []byte) string {
	url := string(n.URL(source))
	if n.AutoLinkType == ast.AutoLinkEmail && !strings.HasPrefix(strings.ToLower(url), "mailto:") {
		return "mailto:" + url
	}
	return url
}

// text returns a run of text with its escapes and entities resolved, and the
// break behind it.
func (c *converter) text(n *ast.Text) []report.Inline {
	value := string(n.Segment.Value(c.source))
	if !n.IsRaw() {
		value = resolve([]byte(value))
	}
	out := []report.Inline{report.Text(value)}
	switch {
	case n.HardLineBreak():
		out = append(out, report.LineBreak{})
	case n.SoftLineBreak():
		out = append(out, report.Text("\n"))
	}
	return out
}

// resolve undoes backslash escapes and entities, by way of goldmark's own
// HTML writer, which knows when they count.
func resolve(value []byte) string {
	var escaped bytes.Buffer
	w := bufio.NewWriter(&escaped)
	html.DefaultWriter.Write(w, value)
	_ = w.Flush() // into memory
	return stdhtml.UnescapeString(escaped.String())
}

func (c *converter) code(n *ast.CodeSpan) string {
	var text strings.Builder
	for child := n.FirstChild(); child != nil; child = child.NextSibling() {
		if t, ok := child.(*ast.Text); ok {
			text.Write(bytes.ReplaceAll(t.Segment.Value(c.source), []byte("\n"), []byte(" ")))
		}
	}
	return text.String()
}

// footnote returns the reference to a footnote of the author's, and takes
// the note in at its first mention.
func (c *converter) footnote(n *extast.FootnoteLink) []report.Inline {
	number, ok := c.numbers[n.Index]
	if !ok {
		c.doc.Footnotes = append(c.doc.Footnotes, report.Footnote{})
		number = len(c.doc.Footnotes)
		c.numbers[n.Index] = number
		if note := c.footnotes[n.Index]; note != nil {
			blocks := c.blocks(note)
			c.doc.Footnotes[number-1].Blocks = blocks
		}
	}
	return []report.Inline{report.FootnoteRef(number)}
}

// expression evaluates {{ … }}.
func (c *converter) expression(n *expressionNode) []report.Inline {
	value, err := c.scope().evaluate(n.source)
	if err != nil {
		c.add(c.nb.at(n.offset), c.nameHint(err), "{{ %s }}: %v", n.source, err)
		return nil
	}
	return c.show(value)
}

// show prints a value, with its doubts as footnotes.
func (ev *evaluation) show(value any) []report.Inline {
	switch v := value.(type) {
	case Quantity:
		return append([]report.Inline{report.Text(v.Print(ev.system))}, ev.refs(v.Notes)...)
	case string:
		return []report.Inline{report.Text(v)}
	case bool:
		if v {
			return []report.Inline{report.Text("yes")}
		}
		return []report.Inline{report.Text("no")}
	}
	panic(fmt.Sprintf("notebook: a %T cannot be shown", value))
}
