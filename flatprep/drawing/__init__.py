"""DXF in (curves, contours, parts) and DXF out."""
