"""Writes the DXF files of this folder that carry expected values, and expected.json beside them.

Run by hand with Python 3.11 and ezdxf 1.4.4 (MIT); the tests only read the results. The geometry is invented. The
expected values are the library's own: points that it finds on curves, and ends of lines after it has exploded blocks.
"""
import json
import math
import os

import ezdxf
from ezdxf.entities import DXFGraphic
from ezdxf.explode import virtual_block_reference_entities
from ezdxf.math import Vec3
from ezdxf.render import MeshBuilder

here = os.path.dirname(os.path.abspath(__file__))
expected = {}


def save(doc, name):
    doc.saveas(os.path.join(here, name))


def rounded(points):
    return [[float(v) for v in Vec3(p).xyz] for p in points]


def releases():
    """The same five figures in every release, on layers whose names need the code page or escapes."""
    for release in ["R12", "R2000", "R2004", "R2007", "R2010", "R2013", "R2018"]:
        doc = ezdxf.new(release)
        doc.header["$INSUNITS"] = 4
        model = doc.modelspace()
        doc.layers.add("Gläser")
        doc.layers.add("Träger 90°")
        model.add_line((0, 0), (4000, 0), dxfattribs={"layer": "Träger 90°"})
        model.add_line((4000, 0), (4000, 3000), dxfattribs={"layer": "träger 90°"})
        outline = [(0, 0), (4000, 0), (4000, 3000), (0, 3000)]
        attribs = {"layer": "Gläser"}
        if release == "R12":
            model.add_polyline2d(outline, close=True, dxfattribs=attribs)
        else:
            model.add_lwpolyline(outline, close=True, dxfattribs=attribs)
        model.add_circle((2000, 1500), 500, dxfattribs=attribs)
        model.add_arc((2000, 1500), 800, 30, 120, dxfattribs=attribs)
        model.add_text("P1", dxfattribs={"layer": "Notes"})
        save(doc, f"release-{release.lower()}.dxf")


def code_pages():
    for page, layer in [("cp1251", "Стекло"), ("cp932", "硝子屋根"), ("gbk", "联通"), ("cp1253", "γυαλί")]:
        doc = ezdxf.new("R2000")
        doc.encoding = page
        doc.layers.add(layer)
        doc.modelspace().add_line((0, 0), (1, 0), dxfattribs={"layer": layer})
        save(doc, f"code-page-{page}.dxf")


def curves():
    doc = ezdxf.new("R2018")
    doc.header["$INSUNITS"] = 6
    model = doc.modelspace()
    found = {}

    def keep(name, entity, points):
        entity.dxf.layer = name
        found[name] = rounded(points)

    arc = model.add_arc((3, 2), 5, 300, 75)
    keep("arc", arc, arc.vertices([300 + 135 * i / 40 for i in range(41)]))
    low = model.add_arc((3, 2), 5, 20, 75, dxfattribs={"extrusion": (0, 0, -1)})
    keep("arc-below", low, low.vertices([20 + 55 * i / 40 for i in range(41)]))
    tilted = model.add_circle((1, 2, 3), 4, dxfattribs={"extrusion": (1, 2, 2)})
    keep("circle-tilted", tilted, tilted.vertices([360 * i / 60 for i in range(60)]))
    ellipse = model.add_ellipse((-2, 1), (6, 2), 0.4, 0.5, 4.1)
    keep("ellipse", ellipse, ellipse.vertices([0.5 + 3.6 * i / 60 for i in range(61)]))
    below = model.add_ellipse((-2, 1), (6, 2), 0.4, 0.5, 4.1, dxfattribs={"extrusion": (0, 0, -1)})
    keep("ellipse-below", below, below.vertices([0.5 + 3.6 * i / 60 for i in range(61)]))
    whole = model.add_ellipse((8, 1), (0, 3), 0.5)
    keep("ellipse-whole", whole, whole.vertices([2 * math.pi * i / 60 for i in range(60)]))

    def spline(name, entity):
        tool = entity.construction_tool()
        last = tool.max_t
        first = tool.knots()[tool.degree]
        keep(name, entity, tool.points([first + (last - first) * i / 80 for i in range(81)]))

    controls = [(0, 0, 0), (2, 5, 0), (4, -3, 0), (7, 4, 0), (9, 0, 0), (12, 1, 0)]
    spline("spline-open", model.add_open_spline(controls, degree=3))
    spline("spline-5", model.add_open_spline(controls, degree=5))
    spline("spline-rational", model.add_rational_spline(controls, weights=[1, 3, 0.5, 2, 1, 1], degree=3))
    spline("spline-space", model.add_open_spline([(0, 0, 1), (2, 5, 2), (4, -3, 4), (7, 4, 3)], degree=3))
    closed = model.add_spline()
    closed.set_closed(controls, degree=3)
    tool = closed.construction_tool()
    keep("spline-closed", closed, tool.points([tool.knots()[3] + (tool.knots()[-4] - tool.knots()[3]) * i / 80 for i in range(81)]))
    bulges = [(0, 0, 0.5), (6, 0, -0.25), (6, 4, 1), (0, 4, 0)]
    outline = model.add_lwpolyline(bulges, format="xyb", close=True)
    points = []
    for part in outline.virtual_entities():
        if part.dxftype() == "ARC":
            sweep = (part.dxf.end_angle - part.dxf.start_angle) % 360
            points.extend(part.vertices([part.dxf.start_angle + sweep * i / 20 for i in range(21)]))
        else:
            points.extend([part.dxf.start, part.dxf.end])
    keep("bulges", outline, points)
    save(doc, "curves-of-all-kinds.dxf")
    expected["curves-of-all-kinds.dxf"] = found


def exploded(model):
    """Ends of all lines after every block is unfolded, by the library."""

    def walk(entity: DXFGraphic, layer):
        if entity.dxftype() == "INSERT":
            for copy in entity.multi_insert():
                for part in virtual_block_reference_entities(copy):
                    yield from walk(part, layer if part.dxf.layer == "0" else part.dxf.layer)
        elif entity.dxftype() == "LINE":
            yield [*rounded([entity.dxf.start, entity.dxf.end]), layer]

    return [line for entity in model for line in walk(entity, entity.dxf.layer)]


def blocks():
    doc = ezdxf.new("R2010")
    doc.header["$INSUNITS"] = 6
    for name in ["A", "B", "C"]:
        doc.layers.add(name)
    flag = doc.blocks.new("FLAG", base_point=(1, 0.5, 0))
    flag.add_line((0, 0), (3, 0))
    flag.add_line((3, 0), (3, 2), dxfattribs={"layer": "B"})
    flag.add_line((3, 2), (0.5, 1, 0.25))
    pair = doc.blocks.new("PAIR", base_point=(0, 0, 0))
    pair.add_blockref("FLAG", (5, 0), dxfattribs={"rotation": 30, "xscale": 2, "yscale": 2, "zscale": 2})
    pair.add_blockref("FLAG", (-5, 0), dxfattribs={"layer": "C", "xscale": -1, "yscale": 0.5, "zscale": 1})
    model = doc.modelspace()
    model.add_blockref("FLAG", (10, 20), dxfattribs={"layer": "A"})
    model.add_blockref("FLAG", (10, 20), dxfattribs={"layer": "A", "rotation": 90, "xscale": -1})
    model.add_blockref("PAIR", (100, 50, 2), dxfattribs={"layer": "A", "rotation": -45, "xscale": 1.5, "yscale": 1.5, "zscale": 1.5})
    model.add_blockref("FLAG", (7, 3), dxfattribs={"layer": "A", "extrusion": (0, 0, -1), "rotation": 20})
    grid = model.add_blockref("FLAG", (200, 0), dxfattribs={"layer": "A", "rotation": 15, "xscale": 0.5, "yscale": 0.5})
    grid.dxf.column_count = 3
    grid.dxf.row_count = 2
    grid.dxf.column_spacing = 4
    grid.dxf.row_spacing = 5
    save(doc, "blocks-nested.dxf")
    expected["blocks-nested.dxf"] = exploded(model)


def meshes():
    doc = ezdxf.new("R2010")
    doc.header["$INSUNITS"] = 6
    model = doc.modelspace()
    points = [(0, 0, 0), (4, 0, 0.5), (4, 3, 1), (2, 5, 1.5), (0, 3, 1)]
    mesh = model.add_mesh(dxfattribs={"layer": "MESH"})
    with mesh.edit_data() as data:
        data.vertices = [*points, (8, 0, 1), (8, 3, 1.5)]
        data.faces = [[0, 1, 2, 3, 4], [1, 5, 6, 2]]
    builder = MeshBuilder()
    builder.vertices = [Vec3(x + 20, y, z) for x, y, z in points]
    builder.faces = [[0, 1, 2, 4], [2, 3, 4]]
    builder.render_polyface(model, dxfattribs={"layer": "POLYFACE"})
    sheet = model.add_polymesh((4, 3), dxfattribs={"layer": "SHEET"})
    for i in range(4):
        for j in range(3):
            sheet.set_mesh_vertex((i, j), (40 + i, j, 0.1 * i * j))
    ring = model.add_polymesh((3, 8), dxfattribs={"layer": "RING"})
    for i in range(3):
        for j in range(8):
            angle = math.pi * j / 4
            ring.set_mesh_vertex((i, j), (60 + (2 + i) * math.cos(angle), (2 + i) * math.sin(angle), 0.5 * i))
    ring.n_close()
    # A pentagon as a quad and a triangle with the edge between them hidden in both.
    quad = model.add_3dface([(80, 0, 0), (84, 0, 0), (84, 3, 0), (80, 3, 0)], dxfattribs={"layer": "FACES"})
    quad.set_edge_visibility(2, False)
    top = model.add_3dface([(84, 3, 0), (82, 5, 0), (80, 3, 0), (80, 3, 0)], dxfattribs={"layer": "FACES"})
    top.dxf.invisible_edges = 8
    model.add_3dface([(84, 0, 0), (88, 0, 0), (88, 3, 0), (84, 3, 0)], dxfattribs={"layer": "FACES"})
    model.add_polyline3d([(90, 0, 1), (94, 0, 2), (94, 3, 3)], close=True, dxfattribs={"layer": "SPACE"})
    model.add_point((1, 2, 3), dxfattribs={"layer": "LEVELS"})
    save(doc, "meshes.dxf")


def leftovers():
    """One outline to read, and one of nearly everything that is not read."""
    doc = ezdxf.new("R2018")
    doc.header["$INSUNITS"] = 6
    doc.layers.add("PLAN")
    doc.layers.add("Frozen").freeze()
    doc.layers.add("Off").off()
    model = doc.modelspace()
    model.add_lwpolyline([(0, 0), (2, 0), (2, 2), (0, 2)], close=True, dxfattribs={"layer": "PLAN"})
    model.add_line((0, 0), (9, 9), dxfattribs={"layer": "Frozen"})
    model.add_line((0, 0), (9, 9), dxfattribs={"layer": "off"})
    model.add_line((0, 0), (9, 9), dxfattribs={"layer": "PLAN", "invisible": 1})
    model.add_text("P1", dxfattribs={"layer": "PLAN"})
    model.add_text("P2", dxfattribs={"layer": "plan"})
    model.add_mtext("Note")
    hatch = model.add_hatch()
    hatch.paths.add_polyline_path([(0, 0), (1, 0), (1, 1)], is_closed=True)
    model.add_linear_dim(base=(0, -1), p1=(0, 0), p2=(2, 0), dimstyle="Standard").render()
    model.add_solid([(0, 0), (1, 0), (0, 1), (1, 1)])
    model.add_ray((0, 0), (1, 0))
    model.add_xline((0, 0), (1, 0))
    model.add_leader([(0, 0), (1, 1)])
    doc.layout("Layout1").add_line((0, 0), (9, 9))
    doc.layouts.new("Second").add_circle((0, 0), 3)
    tag = doc.blocks.new("TAG")
    tag.add_attdef("NAME", (0, 0))
    tag.add_line((0, 0), (0, 1), dxfattribs={"layer": "Frozen"})
    tag.add_line((0, 0), (1, 0))
    model.add_blockref("TAG", (10, 0), dxfattribs={"layer": "PLAN"}).add_attrib("NAME", "x", (10, 0))
    model.add_blockref("TAG", (10, 0), dxfattribs={"layer": "Frozen"})
    model.add_blockref("TAG", (10, 0), dxfattribs={"layer": "Off"})
    model.add_blockref("NOWHERE", (0, 0))
    save(doc, "leftovers.dxf")


releases()
code_pages()
curves()
blocks()
meshes()
leftovers()
with open(os.path.join(here, "expected.json"), "w", encoding="utf-8") as file:
    json.dump(expected, file, indent=1)
    file.write("\n")
