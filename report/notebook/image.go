package notebook

import (
	"bytes"
	"image"
	_ "image/jpeg" // the formats a report can hold
	_ "image/png"
	"path"
	"strings"

	"github.com/yuin/goldmark/ast"

	"shearbook/profile"
	"shearbook/report"
	"shearbook/report/evidence"
)

// Limits of an image in a notebook.
const (
	MaxImageSize   = 20 << 20 // bytes
	MaxImagePixels = 50e6
)

// image reads an image of the author's from beside the notebook.
func (c *converter) image(n *ast.Image) []report.Block {
	name := string(n.Destination)
	at := c.nb.at(c.offset(n))
	if strings.Contains(name, "://") {
		c.add(at, "save it beside the notebook and name the file", "image %q is not a file", name)
		return nil
	}
	data, err := c.readFile(name, evidence.Image)
	if err != nil {
		c.add(at, "name a PNG or JPEG file in the notebook's folder", "image %q cannot be read: %v", name, profile.FileError(err))
		return nil
	}
	config, format, err := image.DecodeConfig(bytes.NewReader(data))
	switch {
	case len(data) > MaxImageSize:
		c.add(at, "scale it down", "image %q is larger than %d MiB", name, MaxImageSize>>20)
	case err != nil:
		c.add(at, "save it as PNG or JPEG", "image %q is neither PNG nor JPEG", name)
	case float64(config.Width)*float64(config.Height) > MaxImagePixels:
		c.add(at, "scale it down", "image %q has more than %d million pixels", name, int(MaxImagePixels/1e6))
	default:
		return one(&report.Image{Name: c.imageName(name), Alt: c.plain(n), Title: string(n.Title),
			Data: data, Format: format, Width: config.Width, Height: config.Height})
	}
	return nil
}

// imageName returns the name of an image in the output's folder: its own,
// or a numbered one if another image has it already.
func (ev *evaluation) imageName(file string) string {
	base := path.Base(strings.ReplaceAll(file, "\\", "/"))
	ext := path.Ext(base)
	return unused(ev.imageNames, file, strings.TrimSuffix(base, ext), ext)
}

// plain returns the text of a node without its styles.
func (c *converter) plain(n ast.Node) string {
	var text strings.Builder
	for child := n.FirstChild(); child != nil; child = child.NextSibling() {
		if t, ok := child.(*ast.Text); ok {
			text.WriteString(resolve(t.Segment.Value(c.source)))
			continue
		}
		text.WriteString(c.plain(child))
	}
	return text.String()
}
