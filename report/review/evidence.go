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
			Summary: "A report carries an attachment that its manifest does not list, or lists a file whose digest no page prints",
			Source:  "the manifest of the report"},
		{ID: "results", Weight: Answer, check: resultsDiffer,
			Summary: "Another figure of results.json than the class and the average does not follow from the data",
			Source:  "the data of the submission"},
		{ID: "text", Weight: Answer, check: textDiffers,
			Summary: "The text of the report does not say what its own results.json says",
			Source:  "the results.json of the submission"},
		{ID: "text-mention", Weight: Explain, check: textMentions,
			Summary: "The text of the report names, in passing, a site class that its results.json gives nowhere",
			Source:  "the results.json of the submission"},
	}
}
