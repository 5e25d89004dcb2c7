// Package templates holds the notebooks that shearbook writes and starts
// from. They are ordinary notebooks: what is in them can be changed, copied
// and kept.
package templates

import _ "embed"

// Standard is the body of the standard report, below the front matter. It
// names no profile and no code, so it serves for any front matter that does.
//
//go:embed standard.md
var Standard string

// Batch is the body of the summary of a batch. Its workings are those of
// package report/batch, over the tables of the batch.
//
//go:embed batch.md
var Batch string

// StarterNotebook is the notebook of a new site folder.
//
//go:embed starter/notebook.md
var StarterNotebook string

// StarterProfile is the invented profile of a new site folder.
//
//go:embed starter/line-1.csv
var StarterProfile string

// Review is the body of the memo of a review, below the front matter. Its
// workings are those of report/review.
//
//go:embed review.md
var Review string
