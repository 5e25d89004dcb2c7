package review

// evidenceRules are about whether the parts of a submission fit together.
func evidenceRules() []Rule {
	return []Rule{
		{ID: "digest", Weight: Answer, check: digests,
			Summary: "A digest that the submission prints of a file is not that of the file",
			Source:  "SHA-256, FIPS 180-4"},
		{ID: "evidence", Weight: Answer, check: evidenceFaults,
			Summary: "The evidence inside a report does not fit together: an attachment, a printed digest or the pages are not those of its manifest",
			Source:  "the manifest of the report"},
		{ID: "evidence-loose", Weight: Explain, check: looseEvidence,
			Summary: "A report carries an attachment that its manifest does not list, lists a file whose digest no page prints, was saved again, or carries no evidence at all",
			Source:  "the manifest of the report"},
		{ID: "results", Weight: Answer, check: resultsDiffer,
			Summary: "Another figure of results.json than the class and the average does not follow from the data",
			Source:  "the data of the submission"},
		{ID: "text", Weight: Answer, check: textDiffers,
			Summary: "The text of the report does not say what its own results.json says",
			Source:  "the results.json of the submission"},
		{ID: "text-mention", Weight: Note, check: textMentions,
			Summary: "The prose of the report names a site class or an average that its results.json gives nowhere; it may be that of other ground",
			Source:  "the results.json of the submission"},
	}
}
