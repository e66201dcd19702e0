/** What is read of which format. */
interface Reads {
  readonly format: string
  readonly taken: string
  readonly chorded: string
  readonly leftOut: string
}

const reads: readonly Reads[] = [
  {
    format: 'DXF, ASCII, releases 12 to 2018 (.dxf)',
    taken: 'LINE, LWPOLYLINE, POLYLINE (2D, 3D, polygon mesh, polyface mesh), 3DFACE, MESH, INSERT (scaled, mirrored, turned, nested, in arrays), POINT (as marks and levels)',
    chorded: 'ARC, CIRCLE, ELLIPSE, SPLINE (knots, or fit points only), bulges',
    leftOut: 'everything else, layers that are off or frozen, paper space; binary DXF and DWG are refused (save as DXF 2018 ASCII)',
  },
  {
    format: 'SVG 1.1 and 2 (.svg)',
    taken: 'rect, polygon, polyline, line, path, use, symbol, nested svg and transforms; units and viewBox; --scale says how it was drawn',
    chorded: 'circle, ellipse, rounded rect, curves and arcs in paths',
    leftOut: 'text, images, what is hidden or not painted, definitions, page backgrounds; clip paths and masks are not applied',
  },
  {
    format: 'OBJ (.obj)',
    taken: 'v, f (faces), l (lines), p (points); g and o are layers',
    chorded: 'nothing',
    leftOut: 'free-form curves and surfaces; materials and normals carry no geometry',
  },
  {
    format: 'GeoJSON, RFC 7946 (.geojson, .json)',
    taken: 'Polygon, MultiPolygon, LineString, MultiLineString, GeometryCollection, Point and MultiPoint (as marks); interior rings are voids; the property "layer" is the layer',
    chorded: 'nothing',
    leftOut: 'features without geometry, reference systems (numbers are taken as lengths)',
  },
]

const block = ({ format, taken, chorded, leftOut }: Reads): string => `${format}\n  taken     ${taken}\n  chorded   ${chorded}\n  left out  ${leftOut}\n`

export const helpFormats = `A file is recognised by its content, whatever its name; text may be UTF-8 or UTF-16, lines may end as they like.
Closed outlines and faces are panels when none overlap and no line runs inside one; then what they leave uncovered inside is
a void. Otherwise everything is line work: every bounded face is a panel unless --void X,Y lies in it.

${reads.map(block).join('\n')}
Levels (--levels): CSV with columns name, x, y, level in any order, with or without titles, decimal commas too; or the points, blocks and words of a DXF, --levels FILE#LAYER.
`
