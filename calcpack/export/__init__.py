"""From sheets to a PDF file, by nbconvert and Typst."""
