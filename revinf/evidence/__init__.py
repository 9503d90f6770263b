"""The judgement: from a claim and its counts to an assessment with its cautions."""
