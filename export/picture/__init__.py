"""The one picture that drawing, preview, sheet and page share: made from a result, independent of any format."""
