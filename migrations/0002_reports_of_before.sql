-- Reports of before mending: what was read is what is there, nothing was mended, nothing is asked.
UPDATE `revisions`
SET `report` = JSON_SET(
  `report`,
  '$.fileUnit', NULL,
  '$.parts', JSON_ARRAY(),
  '$.mending', JSON_ARRAY(),
  '$.holes', JSON_ARRAY(),
  '$.holesFound', 0,
  '$.choices', JSON_OBJECT('parts', NULL, 'fillHolesUpTo', NULL, 'remeshCells', NULL),
  '$.remeshDeviation', NULL,
  '$.measures', NULL,
  '$.proxy', JSON_OBJECT('triangles', `view_triangles`, 'deviation', NULL),
  '$.places', JSON_ARRAY(),
  '$.asks', JSON_ARRAY(),
  '$.asRead', JSON_OBJECT(
    'triangles', JSON_EXTRACT(`report`, '$.triangles'),
    'vertices', JSON_EXTRACT(`report`, '$.vertices'),
    'openEdges', JSON_EXTRACT(`report`, '$.openEdges'),
    'nonManifoldEdges', JSON_EXTRACT(`report`, '$.nonManifoldEdges'),
    'misorientedEdges', JSON_EXTRACT(`report`, '$.misorientedEdges'),
    'duplicateFacets', JSON_EXTRACT(`report`, '$.duplicateFacets'),
    'shells', JSON_EXTRACT(`report`, '$.shells'),
    'closed', JSON_EXTRACT(`report`, '$.closed'),
    'volume', JSON_EXTRACT(`report`, '$.volume'),
    'area', JSON_EXTRACT(`report`, '$.area'),
    'size', JSON_EXTRACT(`report`, '$.size'),
    'min', JSON_EXTRACT(`report`, '$.min')
  )
)
WHERE `report` IS NOT NULL AND NOT JSON_EXISTS(`report`, '$.asRead');
