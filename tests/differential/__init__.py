"""Random workbooks recalculated here and in LibreOffice, and what is known of the differences."""
