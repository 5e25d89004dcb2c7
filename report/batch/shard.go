package batch

import (
	"encoding/json"
	"path/filepath"
	"slices"
)

// ShardFile says which part of a batch a folder holds.
const ShardFile = "shard.json"

// shardOf is the content of ShardFile.
type shardOf struct {
	Job    string // digest
	Shard  Shard
	Codes  []string
	Tables []string      // digests of those that are a jurisdiction's own
	Pages  DeriveOptions // what they say, but for the codes

	All  int   // units of the whole batch
	Rows []int // of the units of this shard: how many units, how many rows each has, and so on
	Outcome
}

// describeShard writes ShardFile.
func (r *run) describeShard(dir string) error {
	j := r.job
	of := shardOf{Job: j.digest(), Shard: j.Shard, Tables: j.Tables, Pages: j.Derive,
		All: r.all, Rows: r.shape.runs, Outcome: r.outcome}
	of.Pages.Codes, of.Pages.Template = nil, ""
	of.Pages.Facts, of.Pages.Near = j.Facts, j.Near
	for _, c := range j.Codes {
		of.Codes = append(of.Codes, c.ID)
	}
	text, err := json.Marshal(of)
	if err != nil {
		return err
	}
	return writeSynced(filepath.Join(dir, ShardFile), append(text, '\n'))
}

// shape is how many rows each of many units has, run-length encoded.
type shape struct{ runs []int }

// add adds encoded units.
func (s *shape) add(runs []int) {
	for i := 0; i < len(runs); i += 2 {
		if n := len(s.runs); n > 0 && s.runs[n-1] == runs[i+1] {
			s.runs[n-2] += runs[i]
			continue
		}
		s.runs = append(s.runs, runs[i], runs[i+1])
	}
}

func (s *shape) clone() shape { return shape{slices.Clone(s.runs)} }

// encode encodes how many rows units have.
func encode(rows []int) []int {
	var s shape
	for i := 0; i < len(rows); {
		j := i
		for j < len(rows) && rows[j] == rows[i] {
			j++
		}
		s.runs = append(s.runs, j-i, rows[i])
		i = j
	}
	return s.runs
}
