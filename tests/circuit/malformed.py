"""Texts that cannot be read, each with the whole message, caret included.

The messages are part of the product: a change of one is seen here as a change of text.
"""

# The order is that of the notation: chains, nodes, sentences, devices, numbers, expressions, names, laws, hostile
# texts, sections.
MALFORMED: tuple[tuple[str, str, str], ...] = (
    (
        "a node left out",
        "in -- R1 -- C1 -- R2 -- out",
        """\
line 1, column 13: C1 stands where a node must stand
    in -- R1 -- C1 -- R2 -- out
                ^^
    did you leave out the node between R1 and C1, or mean R1 + C1?""",
    ),
    (
        "a node left out before a group",
        "in -- R1 -- (C1 || R2) -- out",
        """\
line 1, column 14: a group of parts stands where a node must stand
    in -- R1 -- (C1 || R2) -- out
                 ^^^^^^^^
    did you leave out the node between R1 and (C1 || R2), or mean R1 + (C1 || R2)?""",
    ),
    (
        "a chain that begins with a part",
        "R1 -- a -- C1 -- gnd",
        """\
line 1, column 1: R1 stands where a node must stand
    R1 -- a -- C1 -- gnd
    ^^
    a chain begins with a node: write a -- R1 -- b""",
    ),
    (
        "a chain that ends with a part",
        "in -- R1",
        """\
line 1, column 7: the chain ends with a part
    in -- R1
          ^^
    write the node at its other end""",
    ),
    (
        "a chain that ends with a dash",
        "in -- R1 --",
        """\
line 1, column 12: a node is missing after --
    in -- R1 --
               ^""",
    ),
    (
        "a chain that begins with a dash",
        "-- R1 -- a",
        """\
line 1, column 1: a chain begins with a node
    -- R1 -- a
    ^^
    write a -- R1 -- b""",
    ),
    (
        "two nodes in a row",
        "in -- a -- R1 -- gnd",
        """\
line 1, column 7: a stands where a part must stand
    in -- a -- R1 -- gnd
          ^
    a part begins with R, L, C, Z or Y; two nodes that are joined by a wire are one node""",
    ),
    (
        "a part in lower case",
        "in -- r1 -- out",
        """\
line 1, column 7: r1 stands where a part must stand
    in -- r1 -- out
          ^^
    names are case-sensitive: did you mean R1?""",
    ),
    (
        "a node inside a group",
        "in -- R1 + a -- out",
        """\
line 1, column 12: a stands where a part must stand
    in -- R1 + a -- out
               ^
    a part begins with R, L, C, Z or Y; two nodes that are joined by a wire are one node""",
    ),
    (
        "a link left empty",
        "in -- -- out",
        """\
line 1, column 7: a part is missing between -- and --
    in -- -- out
          ^^""",
    ),
    (
        "a dash left out",
        "in -- R1 a -- out",
        """\
line 1, column 10: -- is missing between R1 and a
    in -- R1 a -- out
             ^
    write R1 -- a""",
    ),
    (
        "one dash for two",
        "in -- R1 - out",
        """\
line 1, column 10: a single - has no meaning in a chain
    in -- R1 - out
             ^
    write --""",
    ),
    (
        "one dash throughout",
        "in - R1 - out",
        """\
line 1, column 4: a single - has no meaning in a chain
    in - R1 - out
       ^
    write --""",
    ),
    (
        "three dashes",
        "in --- R1 -- out",
        """\
line 1, column 6: a dash too many
    in --- R1 -- out
         ^
    a chain is written with --""",
    ),
    (
        "an arrow",
        "in -> R1 -> out",
        """\
line 1, column 4: -> has no meaning in the notation
    in -> R1 -> out
       ^^
    a chain is written with --""",
    ),
    (
        "one bar",
        "in -- R1 | R2 -- out",
        """\
line 1, column 10: a single | has no meaning in the notation
    in -- R1 | R2 -- out
             ^
    parallel is written ||""",
    ),
    (
        "an ampersand",
        "in -- R1 & R2 -- out",
        """\
line 1, column 10: & has no meaning in the notation
    in -- R1 & R2 -- out
             ^
    series is written +, parallel ||""",
    ),
    (
        "nothing behind +",
        "in -- R1 + -- out",
        """\
line 1, column 12: something is missing between + and --
    in -- R1 + -- out
               ^^""",
    ),
    (
        "two parallel signs",
        "in -- R1 || || R2 -- out",
        """\
line 1, column 13: something is missing between || and ||
    in -- R1 || || R2 -- out
                ^^""",
    ),
    (
        "both ends at one node",
        "a -- R1 -- a",
        """\
line 1, column 6: both ends of R1 are at node a
    a -- R1 -- a
         ^^
    a part stands between two different nodes""",
    ),
    (
        "a part placed twice",
        "a -- R1 -- b -- R1 -- gnd",
        """\
line 1, column 17: R1 is placed twice
    a -- R1 -- b -- R1 -- gnd
                    ^^
    each part has a name of its own""",
    ),
    (
        "a value behind a group",
        "a -- R1 + C1 = 22 nF -- b",
        """\
line 1, column 6: a value stands behind one part of a chain
    a -- R1 + C1 = 22 nF -- b
         ^^^^^^^
    give each part its value""",
    ),
    (
        "a value before a chain",
        "C1 = 22 nF -- gnd",
        """\
line 1, column 1: a chain begins and ends with a node
    C1 = 22 nF -- gnd
    ^^
    write a -- C1 = ... -- b""",
    ),
    (
        "a node with a value in a chain",
        "a = 3 -- R1 -- b",
        """\
line 1, column 1: a chain begins and ends with a node
    a = 3 -- R1 -- b
    ^
    only parts have values""",
    ),
    (
        "a last node with a value",
        "a -- R1 -- b = 3",
        """\
line 1, column 12: node b cannot have a value
    a -- R1 -- b = 3
               ^
    values belong to parts""",
    ),
    (
        "a value without =",
        "a -- C1 22 nF -- gnd",
        """\
line 1, column 9: = is missing between C1 and 22
    a -- C1 22 nF -- gnd
            ^^
    write C1 = 22 nF""",
    ),
    (
        "two parts with values in one link",
        "a -- R1 = 470k || C1 = 330p -- gnd",
        """\
line 1, column 16: a value stands behind one part of a chain
    a -- R1 = 470k || C1 = 330p -- gnd
                   ^^
    write R1 || C1, and the values apart: R1 = ...""",
    ),
    (
        "a part with a value beside one without",
        "m -- R2 = 9.1k || C2 -- y",
        """\
line 1, column 16: a value stands behind one part of a chain
    m -- R2 = 9.1k || C2 -- y
                   ^^
    write R2 || C2, and the values apart: R2 = ...""",
    ),
    (
        "an expression inside a chain",
        "a -- C1 = 2*C2 -- gnd",
        """\
line 1, column 12: inside a chain a value is one quantity or one name
    a -- C1 = 2*C2 -- gnd
               ^
    give an expression in a statement of its own: C1 = ...""",
    ),
    (
        "a value left out in a chain",
        "a -- C1 = -- gnd",
        """\
line 1, column 11: the value is missing
    a -- C1 = -- gnd
              ^^
    leave out the = when the part has none""",
    ),
    (
        "node 0",
        "a -- R1 -- 0",
        """\
line 1, column 12: 0 is no node; the reference is called gnd
    a -- R1 -- 0
               ^
    write gnd""",
    ),
    (
        "GND",
        "a -- R1 -- GND",
        """\
line 1, column 12: the reference is called gnd
    a -- R1 -- GND
               ^^^
    write gnd for GND""",
    ),
    (
        "ground",
        "drive ground",
        """\
line 1, column 7: the reference is called gnd
    drive ground
          ^^^^^^
    write gnd for ground""",
    ),
    (
        "a node with leading zero",
        "a -- R1 -- 01",
        """\
line 1, column 12: 01 is no node
    a -- R1 -- 01
               ^^
    a node has a name, or a whole number from 1""",
    ),
    (
        "a node with a point",
        "a -- R1 -- 2.5",
        """\
line 1, column 12: 2.5 is no node
    a -- R1 -- 2.5
               ^^^
    a node has a name, or a whole number from 1""",
    ),
    (
        "a node that begins with a digit",
        "3V3 -- R1 -- out",
        """\
line 1, column 1: 3V3 is neither a number nor a name
    3V3 -- R1 -- out
    ^
    a name begins with a letter""",
    ),
    (
        "a node called s",
        "a -- R1 -- s",
        """\
line 1, column 12: s is the Laplace variable and cannot be a node
    a -- R1 -- s
               ^
    choose another name""",
    ),
    (
        "a node called v_b",
        "a -- R1 -- v_b",
        """\
line 1, column 12: v_b means the voltage of b and cannot be a node
    a -- R1 -- v_b
               ^^^
    call it b""",
    ),
    (
        "a node called read",
        "a -- R1 -- read",
        """\
line 1, column 12: read is a word of the notation and cannot be a node
    a -- R1 -- read
               ^^^^
    choose another name""",
    ),
    (
        "a name with a point",
        "a -- R1.5 -- b",
        """\
line 1, column 8: = is missing between R1 and .5
    a -- R1.5 -- b
           ^^
    write R1 = .5""",
    ),
    (
        "a name with an underscore before",
        "_a -- R1 -- b",
        """\
line 1, column 1: a name begins with a letter
    _a -- R1 -- b
    ^
    names are made of letters, digits and _""",
    ),
    (
        "a long name",
        "a -- R1 -- " + "b" * 65,
        """\
line 1, column 12: a name has at most 64 letters
    a -- R1 -- bbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbbb
               ^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^
    choose a shorter one""",
    ),
    (
        "drive nothing",
        "drive",
        """\
line 1, column 6: this drive statement is not complete
    drive
         ^
    write: drive in, drive a - b as Vs, drive current into a, or drive current from a to b""",
    ),
    (
        "drive a part",
        "drive R1",
        """\
line 1, column 7: R1 stands where a node must stand
    drive R1
          ^^
    names that begin with R are parts""",
    ),
    (
        "drive with a value",
        "drive in = 5 V",
        """\
line 1, column 10: a drive has no value: H is what is read divided by what drives
    drive in = 5 V
             ^
    leave out the = and what follows""",
    ),
    (
        "drive two",
        "drive in, out",
        """\
line 1, column 9: one drive, one statement
    drive in, out
            ^
    write drive ...; drive ...""",
    ),
    (
        "drive current nowhere",
        "drive current",
        """\
line 1, column 14: this drive statement is not complete
    drive current
                 ^
    write: drive in, drive a - b as Vs, drive current into a, or drive current from a to b""",
    ),
    (
        "drive current a",
        "drive current a",
        """\
line 1, column 15: a is not expected in this drive statement
    drive current a
                  ^
    write: drive in, drive a - b as Vs, drive current into a, or drive current from a to b""",
    ),
    (
        "drive current from",
        "drive current from a",
        """\
line 1, column 21: this drive statement is not complete
    drive current from a
                        ^
    write: drive in, drive a - b as Vs, drive current into a, or drive current from a to b""",
    ),
    (
        "drive current from a to a",
        "drive current from a to a",
        """\
line 1, column 25: both nodes are a
    drive current from a to a
                            ^
    a current needs two different nodes""",
    ),
    (
        "drive a - a",
        "drive a - a",
        """\
line 1, column 11: both nodes are a
    drive a - a
              ^
    name two different nodes""",
    ),
    (
        "drive gnd",
        "drive gnd",
        """\
line 1, column 7: gnd against gnd is nothing
    drive gnd
          ^^^
    name another node""",
    ),
    (
        "drive as a part",
        "drive in as R1",
        """\
line 1, column 13: R1 cannot be the name of a drive
    drive in as R1
                ^^
    names that begin with R are branches""",
    ),
    (
        "drive as nothing",
        "drive in as",
        """\
line 1, column 12: this drive statement is not complete
    drive in as
               ^
    write: drive in, drive a - b as Vs, drive current into a, or drive current from a to b""",
    ),
    (
        "drive misspelt",
        "drvie in",
        """\
line 1, column 1: drvie is not a word that begins a statement
    drvie in
    ^^^^^
    did you mean drive?""",
    ),
    (
        "drive with a capital",
        "Drive in",
        """\
line 1, column 1: Drive is not a word that begins a statement
    Drive in
    ^^^^^
    did you mean drive?""",
    ),
    (
        "read nothing",
        "read",
        """\
line 1, column 5: this read statement is not complete
    read
        ^
    write: read out, read a - b, or read i_R1""",
    ),
    (
        "read two",
        "read a, b",
        """\
line 1, column 7: one read, one statement
    read a, b
          ^
    write read ...; read ...""",
    ),
    (
        "read with a value",
        "read a = b",
        """\
line 1, column 8: a read has no value
    read a = b
           ^
    write: read out, read a - b, or read i_R1""",
    ),
    (
        "read a number that is no node",
        "1 -- R1 -- 2; read 3",
        """\
line 1, column 20: the network has no node 3
    1 -- R1 -- 2; read 3
                       ^
    nodes: 1, 2""",
    ),
    (
        "read zero",
        "1 -- R1 -- 2; read 0",
        """\
line 1, column 20: this read has no voltage and no current in it
    1 -- R1 -- 2; read 0
                       ^
    it is a sum of voltages and currents, each with a factor""",
    ),
    (
        "read a constant",
        "a -- R1 -- b; read R1",
        """\
line 1, column 20: this read has no voltage and no current in it
    a -- R1 -- b; read R1
                       ^^
    it is a sum of voltages and currents, each with a factor""",
    ),
    (
        "read with s",
        "a -- L1 -- b; read s*L1*i_L1",
        """\
line 1, column 20: what is read cannot contain s
    a -- L1 -- b; read s*L1*i_L1
                       ^
    read a voltage or a current, such as v_L1 or i_C1""",
    ),
    (
        "read a node that is not there",
        "a -- R1 -- b; read c",
        """\
line 1, column 20: c stands where a voltage must stand and the network has no node c
    a -- R1 -- b; read c
                       ^
    nodes: a, b""",
    ),
    (
        "hold nothing",
        "hold out",
        """\
line 1, column 9: this hold statement does not say what it follows
    hold out
            ^
    write: hold out = mu*(p - m), or hold a - b = r*i_R1""",
    ),
    (
        "hold without value",
        "hold out =",
        """\
line 1, column 11: the value is missing
    hold out =
              ^
    write: hold out = mu*(p - m), or hold a - b = r*i_R1""",
    ),
    (
        "push to",
        "push to c = a",
        """\
line 1, column 6: to is not expected in this push statement
    push to c = a
         ^^
    write: push from d to c = gm*(g - c), or push into c = gm*g""",
    ),
    (
        "push without into",
        "push a to b = c",
        """\
line 1, column 6: a is not expected in this push statement
    push a to b = c
         ^
    write: push from d to c = gm*(g - c), or push into c = gm*g""",
    ),
    (
        "push without to",
        "push from a = c",
        """\
line 1, column 13: = is not expected in this push statement
    push from a = c
                ^
    write: push from d to c = gm*(g - c), or push into c = gm*g""",
    ),
    (
        "a law named as a node",
        "a -- R1 -- b; hold b = 2*a as a",
        """\
line 1, column 15: a is already the name of a node
    a -- R1 -- b; hold b = 2*a as a
                  ^^^^^^^^^^^^^^^^^
    choose another name""",
    ),
    (
        "two laws of one name",
        "a -- R1 -- b; hold b = 2*a as amp; push into a = i_R1 as amp",
        """\
line 1, column 36: amp is already the name of a law
    a -- R1 -- b; hold b = 2*a as amp; push into a = i_R1 as amp
                                       ^^^^^^^^^^^^^^^^^^^^^^^^^
    choose another name""",
    ),
    (
        "free nothing",
        "free",
        """\
line 1, column 5: this free statement is not complete
    free
        ^
    write: free Z0, K or free gm in S""",
    ),
    (
        "free s",
        "free s",
        """\
line 1, column 6: s is the Laplace variable and cannot be a free symbol
    free s
         ^
    choose another name""",
    ),
    (
        "free in a prefix",
        "free x in mS",
        """\
line 1, column 11: mS has a prefix
    free x in mS
              ^^
    a dimension is given by its unit alone: in S""",
    ),
    (
        "free in no unit",
        "free x in parsec",
        """\
line 1, column 11: parsec is not a unit
    free x in parsec
              ^^^^^^
    units: ohm, S, F, H, V, A, s, V/V""",
    ),
    (
        "free against its letter",
        "free Rx in F",
        """\
line 1, column 6: Rx is in ohm by its first letter
    free Rx in F
         ^^
    leave out the unit, or write in ohm""",
    ),
    (
        "free twice",
        "free K, K",
        """\
line 1, column 9: K is declared free twice
    free K, K
            ^
    once is enough""",
    ),
    (
        "free a node",
        "a -- R1 -- b; free a",
        """\
line 1, column 20: a is already the name of a node
    a -- R1 -- b; free a
                       ^
    choose another name""",
    ),
    (
        "another notation",
        "notation 2",
        """\
line 1, column 10: notation 2 is not known
    notation 2
             ^
    this release of symnet reads notation 1""",
    ),
    (
        "a notation in words",
        "notation one",
        """\
line 1, column 10: one is not expected in this notation statement
    notation one
             ^^^
    write: notation 1""",
    ),
    (
        "define",
        "define section(in, out; R, C = 10 nF)",
        """\
line 1, column 1: this definition has no end
    define section(in, out; R, C = 10 nF)
    ^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^
    end it with the word done on a line of its own""",
    ),
    (
        "done",
        "done",
        """\
line 1, column 1: done ends a section and none is open
    done
    ^^^^
    a section begins with define name(in, out)""",
    ),
    (
        "let",
        "let g = 1 + s*R1*C1",
        """\
line 1, column 1: let is not in this release of the notation
    let g = 1 + s*R1*C1
    ^^^
    give the symbol a value: g = 2*R1""",
    ),
    (
        "a node equation",
        "node a: (in - a)/R1 = s*C1*a",
        """\
line 1, column 1: node is not in this release of the notation
    node a: (in - a)/R1 = s*C1*a
    ^^^^
    node equations belong to a hand derivation""",
    ),
    (
        "a part alone",
        "R1",
        """\
line 1, column 1: R1 by itself says nothing
    R1
    ^^
    write a chain (a -- R1 -- b), a value (R1 = 4.7 kohm) or a sentence (drive in)""",
    ),
    (
        "a row of a table",
        "R1 in out 10k",
        """\
line 1, column 4: in does not follow R1 in any statement
    R1 in out 10k
       ^^
    a part stands between its nodes: in -- R1 -- out""",
    ),
    (
        "terminals without names",
        "U1: opamp(p)",
        """\
line 1, column 11: terminals and values of a device are named
    U1: opamp(p)
              ^
    write U1: opamp(plus=..., minus=..., out=...), and if wanted gain, gbw, pole2, Rin, Cin, Rout""",
    ),
    (
        "a terminal left out",
        "U1: opamp(plus=p, minus=m)",
        """\
line 1, column 1: U1 has no out
    U1: opamp(plus=p, minus=m)
    ^^^^^^^^^^^^^^^^^^^^^^^^^^
    write U1: opamp(plus=..., minus=..., out=...), and if wanted gain, gbw, pole2, Rin, Cin, Rout""",
    ),
    (
        "two terminals left out",
        "U1: opamp(plus=p)",
        """\
line 1, column 1: U1 has no minus and no out
    U1: opamp(plus=p)
    ^^^^^^^^^^^^^^^^^
    write U1: opamp(plus=..., minus=..., out=...), and if wanted gain, gbw, pole2, Rin, Cin, Rout""",
    ),
    (
        "an unknown terminal",
        "U1: opamp(plus=p, minus=m, out=o, offset=x)",
        """\
line 1, column 35: an opamp has no terminal or parameter offset
    U1: opamp(plus=p, minus=m, out=o, offset=x)
                                      ^^^^^^
    write U1: opamp(plus=..., minus=..., out=...), and if wanted gain, gbw, pole2, Rin, Cin, Rout""",
    ),
    (
        "a terminal twice",
        "U1: opamp(plus=p, plus=m, out=o)",
        """\
line 1, column 19: plus is given twice
    U1: opamp(plus=p, plus=m, out=o)
                      ^^^^
    write U1: opamp(plus=..., minus=..., out=...), and if wanted gain, gbw, pole2, Rin, Cin, Rout""",
    ),
    (
        "a property with a small letter",
        "U1: opamp(plus=p, minus=m, out=o, rout=75)",
        """\
line 1, column 35: an opamp has no terminal or parameter rout
    U1: opamp(plus=p, minus=m, out=o, rout=75)
                                      ^^^^
    did you mean Rout?""",
    ),
    (
        "an unknown device",
        "T1: triode(a=p, b=m)",
        """\
line 1, column 5: triode is no device or section
    T1: triode(a=p, b=m)
        ^^^^^^
    there are opamp, ota, cfa, bjt, fet, transformer, tapped_transformer, gyrator, nic, fdnr, crystal, potentiometer, and what you define""",
    ),
    (
        "a device without name",
        "opamp(plus=p, minus=m, out=o)",
        """\
line 1, column 1: opamp(...) is a device, and a device has a name
    opamp(plus=p, minus=m, out=o)
    ^^^^^
    write: U1: opamp(plus=p, minus=m, out=o)""",
    ),
    (
        "a device named as a part",
        "R1: opamp(plus=p, minus=m, out=o)",
        """\
line 1, column 1: R1 cannot be the name of a device
    R1: opamp(plus=p, minus=m, out=o)
    ^^
    names that begin with R are branches""",
    ),
    (
        "a device without terminals",
        "U1: opamp",
        """\
line 1, column 10: this device statement is not complete
    U1: opamp
             ^
    write: U1: opamp(plus=p, minus=m, out=o)""",
    ),
    (
        "a terminal at an expression",
        "U1: opamp(plus=2*p, minus=m, out=o)",
        """\
line 1, column 16: plus is connected to a node
    U1: opamp(plus=2*p, minus=m, out=o)
                   ^^^
    write its name""",
    ),
    (
        "a terminal at a part",
        "U1: opamp(plus=R1, minus=m, out=o)",
        """\
line 1, column 16: R1 stands where a node must stand
    U1: opamp(plus=R1, minus=m, out=o)
                   ^^
    names that begin with R are parts""",
    ),
    (
        "a decimal comma",
        "R1 = 4,7 kohm",
        """\
line 1, column 7: a decimal point is written, not a comma
    R1 = 4,7 kohm
          ^
    write 4.7""",
    ),
    (
        "a unit in two words",
        "R1 = 4.7 k ohm",
        """\
line 1, column 12: k ohm is one unit
    R1 = 4.7 k ohm
               ^^^
    write kohm""",
    ),
    (
        "a unit in the wrong case",
        "C1 = 5 nf",
        """\
line 1, column 8: nf is not a unit
    C1 = 5 nf
           ^^
    did you mean 5 nF?""",
    ),
    (
        "Meg",
        "R1 = 10 Meg",
        """\
line 1, column 9: Meg is not a unit
    R1 = 10 Meg
            ^^^
    did you mean 10 M?""",
    ),
    (
        "K before F",
        "C1 = 5 KF",
        """\
line 1, column 8: KF is not a unit
    C1 = 5 KF
           ^^
    did you mean 5 kF?""",
    ),
    (
        "a product without sign",
        "R1 = 2 R2",
        """\
line 1, column 8: R2 follows a number and is not a unit
    R1 = 2 R2
           ^^
    a product is written 2*R2""",
    ),
    (
        "a number with spaces",
        "R1 = 1 000",
        """\
line 1, column 8: a number is written without spaces
    R1 = 1 000
           ^^^
    write 1000""",
    ),
    (
        "a number with underscores",
        "R1 = 1_000",
        """\
line 1, column 7: a number is written without _
    R1 = 1_000
          ^
    write 1000""",
    ),
    (
        "two units",
        "R1 = 5 kohm ohm",
        """\
line 1, column 13: two units behind one number
    R1 = 5 kohm ohm
                ^^^
    leave out kohm or ohm""",
    ),
    (
        "a frequency in Hz",
        "w0 = 1 kHz",
        """\
line 1, column 6: 1 kHz is a frequency, but s is in rad/s
    w0 = 1 kHz
         ^^^^^
    write 6.283185 krad/s""",
    ),
    (
        "a long exponent",
        "R1 = 1e200",
        """\
line 1, column 6: the power of ten of a number lies between -99 and 99
    R1 = 1e200
         ^^^^^
    use a unit with a prefix, such as 10 pF""",
    ),
    (
        "a number of many digits",
        "R1 = " + "7" * 1001,
        """\
line 1, column 6: a number has at most 1000 digits
    R1 = 77777777777777777777777777777777777777777777777777777777777777777777777777777777777777777777777...
         ^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^
    give fewer digits""",
    ),
    (
        "a code in an expression",
        "Z1 = 2R2*C1",
        """\
line 1, column 6: 2R2 is a value code and must stand alone
    Z1 = 2R2*C1
         ^^^
    write 2.2 ohm instead""",
    ),
    (
        "an = too many",
        "R1 == 5",
        """\
line 1, column 4: == has no meaning in the notation
    R1 == 5
       ^^
    write one =""",
    ),
    (
        "a chain of =",
        "R1 = R2 = 5",
        """\
line 1, column 9: a second = in one statement
    R1 = R2 = 5
            ^
    write R1, R2 = ...""",
    ),
    (
        "a value left out",
        "R1 =",
        """\
line 1, column 5: the value is missing
    R1 =
        ^
    a part without value is a symbol""",
    ),
    (
        "a colon for =",
        "R1: 5k",
        """\
line 1, column 3: a value is written with =, not with :
    R1: 5k
      ^
    write R1 = 5 k""",
    ),
    (
        "a space for =",
        "R1 5k",
        """\
line 1, column 4: = is missing between R1 and 5
    R1 5k
       ^
    write R1 = 5 k""",
    ),
    (
        "a tolerance without sign",
        "R1 = 5 kohm 1%",
        """\
line 1, column 13: a tolerance is written with its sign
    R1 = 5 kohm 1%
                ^
    write ±1 %""",
    ),
    (
        "a tolerance without %",
        "R1 = 5 kohm ±1",
        """\
line 1, column 15: a tolerance is a percentage
    R1 = 5 kohm ±1
                  ^
    write ±1 %""",
    ),
    (
        "a tolerance in ohm",
        "R1 = 5 kohm +/-10 ohm",
        """\
line 1, column 19: a tolerance is a percentage
    R1 = 5 kohm +/-10 ohm
                      ^^^
    write ±10 %""",
    ),
    (
        "a tolerance of 200 %",
        "R1 = 5 kohm ±200%",
        """\
line 1, column 14: a tolerance of 200 % is no tolerance
    R1 = 5 kohm ±200%
                 ^^^
    it lies below 100 %""",
    ),
    (
        "a tolerance in two numbers",
        "R1 = 5 kohm ±1/0%",
        """\
line 1, column 14: a tolerance of 1/0 % is no tolerance
    R1 = 5 kohm ±1/0%
                 ^
    it lies below 100 %""",
    ),
    (
        "a tolerance in a law",
        "hold a = 2*b ±1%",
        """\
line 1, column 14: a tolerance stands behind a value only
    hold a = 2*b ±1%
                 ^
    give it where the part gets its value: R1 = 4.7 kohm ±1 %""",
    ),
    (
        "no implicit multiplication of names",
        "Z1 = R C",
        """\
line 1, column 8: a sign is missing between R and C
    Z1 = R C
           ^
    a product is written with *: R*C""",
    ),
    (
        "no implicit multiplication with a parenthesis",
        "Z1 = R(1 + s)",
        """\
line 1, column 7: a sign is missing between R and (
    Z1 = R(1 + s)
          ^
    a product is written with *: R*(...)""",
    ),
    (
        "no implicit multiplication behind a parenthesis",
        "Z1 = (1 + s)R",
        """\
line 1, column 13: a sign is missing between ) and R
    Z1 = (1 + s)R
                ^
    a product is written with *: (...)*R""",
    ),
    (
        "no functions",
        "Z1 = sqrt(R)",
        """\
line 1, column 6: there are no functions in the notation
    Z1 = sqrt(R)
         ^^^^
    values are exact: give the value itself""",
    ),
    (
        "V(out)",
        "hold a = V(out)",
        """\
line 1, column 10: V( ) is not how a voltage is written
    hold a = V(out)
             ^
    a node's name is its voltage: write out""",
    ),
    (
        "V(1)",
        "hold a = V(1)",
        """\
line 1, column 10: V( ) is not how a voltage is written
    hold a = V(1)
             ^
    a node's name is its voltage: write v_1""",
    ),
    (
        "V(a, b)",
        "hold a = V(p, m)",
        """\
line 1, column 10: V( ) is not how a voltage is written
    hold a = V(p, m)
             ^
    write p - m""",
    ),
    (
        "I(R1)",
        "push into a = I(R1)",
        """\
line 1, column 15: I( ) is not how a current is written
    push into a = I(R1)
                  ^
    write i_R1 for the current through R1""",
    ),
    (
        "a parenthesis left open",
        "Z1 = (R + 1",
        """\
line 1, column 6: this parenthesis is not closed
    Z1 = (R + 1
         ^
    add the missing )""",
    ),
    (
        "a parenthesis too many",
        "Z1 = R) + 1",
        """\
line 1, column 7: ) closes nothing
    Z1 = R) + 1
          ^
    remove it, or add the ( it belongs to""",
    ),
    (
        "nothing in parentheses",
        "Z1 = ()",
        """\
line 1, column 7: there is nothing inside the parenthesis
    Z1 = ()
          ^""",
    ),
    (
        "nothing behind + in an expression",
        "Z1 = R +",
        """\
line 1, column 9: something is missing after +
    Z1 = R +
            ^""",
    ),
    (
        "nothing between + and *",
        "Z1 = R + * C",
        """\
line 1, column 10: something is missing between + and *
    Z1 = R + * C
             ^""",
    ),
    (
        "nothing before *",
        "Z1 = * C",
        """\
line 1, column 6: something is missing between = and *
    Z1 = * C
         ^""",
    ),
    (
        "a-- b",
        "hold out = a--b",
        """\
line 1, column 13: -- joins the nodes and parts of a chain and has no meaning here
    hold out = a--b
                ^^
    write a - b, or a - (-b)""",
    ),
    (
        "an exponent that is a name",
        "Z1 = R^n",
        """\
line 1, column 8: an exponent is a whole number
    Z1 = R^n
           ^
    such as s^2 or s^-1""",
    ),
    (
        "an exponent that is a fraction",
        "Z1 = R^(1/2)",
        """\
line 1, column 9: an exponent is a whole number
    Z1 = R^(1/2)
            ^
    there are no roots in the notation""",
    ),
    (
        "an exponent with a point",
        "Z1 = R^0.5",
        """\
line 1, column 8: an exponent is a whole number
    Z1 = R^0.5
           ^^^
    between -64 and 64""",
    ),
    (
        "two exponents",
        "Z1 = R^2^3",
        """\
line 1, column 9: two exponents in a row
    Z1 = R^2^3
            ^
    write (a^2)^3 or a^6""",
    ),
    (
        "a large exponent",
        "Z1 = R^65",
        """\
line 1, column 6: an exponent lies between -64 and 64
    Z1 = R^65
         ^^^^""",
    ),
    (
        "nested exponents",
        "Z1 = (R^9)^9",
        """\
line 1, column 7: an exponent lies between -64 and 64
    Z1 = (R^9)^9
          ^^^^^^""",
    ),
    (
        "**",
        "Z1 = R**2",
        """\
line 1, column 7: ** has no meaning in the notation
    Z1 = R**2
          ^^
    a power is written ^: s^2""",
    ),
    (
        "an exponent behind a unit",
        "K = 2 V^2",
        """\
line 1, column 5: does the exponent belong to the number or to its unit?
    K = 2 V^2
        ^^^^^
    write (2 V)^2""",
    ),
    (
        "seconds in an expression",
        "Z1 = 2 s*R",
        """\
line 1, column 8: s is the Laplace variable and no unit inside an expression
    Z1 = 2 s*R
           ^
    a product is written 2*s; seconds can be written as 1000 ms""",
    ),
    (
        "a quotation mark",
        'Z1 = "R"',
        """\
line 1, column 6: there are no quotation marks in the notation
    Z1 = "R"
         ^
    write the name or the value as it is""",
    ),
    (
        "a bracket",
        "Z1 = [R]",
        """\
line 1, column 6: [ ] have no meaning in the notation
    Z1 = [R]
         ^
    group with ( )""",
    ),
    (
        "a brace",
        "Z1 = {R}",
        """\
line 1, column 6: { } have no meaning in the notation
    Z1 = {R}
         ^
    group with ( )""",
    ),
    (
        "a strange sign",
        "Z1 = R @ C",
        """\
line 1, column 8: @ has no meaning in the notation
    Z1 = R @ C
           ^""",
    ),
    (
        "a percent sign",
        "Z1 = R % 2",
        """\
line 1, column 8: % stands behind the number of a tolerance only
    Z1 = R % 2
           ^
    write ±1 %""",
    ),
    (
        "a root",
        "Z1 = √R",
        """\
line 1, column 6: there are no roots in the notation
    Z1 = √R
         ^
    exponents are whole numbers; give the value itself""",
    ),
    (
        "division by zero",
        "K = 5/0",
        """\
line 1, column 7: division by zero
    K = 5/0
          ^""",
    ),
    (
        "parallel to zero",
        "R1 = 0 ohm || 5 ohm",
        """\
line 1, column 6: division by zero
    R1 = 0 ohm || 5 ohm
         ^^^^^""",
    ),
    (
        "a number too large",
        "K = " + "(9^64)*" * 20 + "1",
        """\
line 1, column 118: this comes to a number of more than 1000 digits
    ...(9^64)*(9^64)*(9^64)*(9^64)*(9^64)*(9^64)*(9^64)*(9^64)*(9^64)*(9^64)*(9^64)*1
                                                         ^^^^""",
    ),
    (
        "unlike numbers",
        "R1 = 2 ohm + 3",
        """\
line 1, column 14: this is a number and what stands before it is in ohm
    R1 = 2 ohm + 3
                 ^
    write the unit: 3 ohm""",
    ),
    (
        "unlike numbers in parallel",
        "R1 = 2 ohm || 3 nF",
        """\
line 1, column 15: this is in F and what stands before it is in ohm
    R1 = 2 ohm || 3 nF
                  ^^^^""",
    ),
    (
        "a value for a node",
        "a -- R1 -- b; a = 5",
        """\
line 1, column 19: a is a node and has no value
    a -- R1 -- b; a = 5
                      ^
    values belong to parts and symbols""",
    ),
    (
        "a value for a law",
        "a -- R1 -- b; hold b = 2*a as amp; amp = 5",
        """\
line 1, column 36: amp is a law and has no value
    a -- R1 -- b; hold b = 2*a as amp; amp = 5
                                       ^^^
    values belong to parts and symbols""",
    ),
    (
        "a value for s",
        "s = 5",
        """\
line 1, column 1: s is the Laplace variable and cannot be given a value
    s = 5
    ^
    choose another name""",
    ),
    (
        "a value for gnd",
        "gnd = 5",
        """\
line 1, column 1: gnd is the reference and cannot be given a value
    gnd = 5
    ^^^
    choose another name""",
    ),
    (
        "two values",
        "a -- R1 -- b; R1 = 5 ohm; R1 = 6 ohm",
        """\
line 1, column 27: R1 has a value already
    a -- R1 -- b; R1 = 5 ohm; R1 = 6 ohm
                              ^^
    give one value only""",
    ),
    (
        "two values, one in the chain",
        "a -- R1 = 5 ohm -- b; R1 = 6 ohm",
        """\
line 1, column 23: R1 has a value already
    a -- R1 = 5 ohm -- b; R1 = 6 ohm
                          ^^
    give one value only""",
    ),
    (
        "a value in the wrong unit",
        "a -- R1 -- b; R1 = 10 nF",
        """\
line 1, column 20: R1 is in ohm, its value is in F
    a -- R1 -- b; R1 = 10 nF
                       ^^^^^
    give R1 in ohm""",
    ),
    (
        "a code of another kind of part",
        "a -- C1 -- b; C1 = 4R7",
        """\
line 1, column 20: C1 is in F, its value is in ohm
    a -- C1 -- b; C1 = 4R7
                       ^^^
    give C1 in F""",
    ),
    (
        "a value for a part that is not there",
        "a -- R1 -- b; Cload = 5 nF",
        """\
line 1, column 15: Cload has a value and stands in no chain
    a -- R1 -- b; Cload = 5 nF
                  ^^^^^
    place it: a -- Cload -- b; or say: free Cload""",
    ),
    (
        "a value for a misspelt part",
        "a -- RL -- b; Rl = 5 kohm",
        """\
line 1, column 15: Rl is not known
    a -- RL -- b; Rl = 5 kohm
                  ^^
    did you mean RL? If it is meant as a free symbol, say: free Rl""",
    ),
    (
        "ties in a circle",
        "a -- R1 -- b -- R2 -- gnd; R1 = R2; R2 = R1",
        """\
line 1, column 42: R2 is tied to itself: R1 -> R2 -> R1
    a -- R1 -- b -- R2 -- gnd; R1 = R2; R2 = R1
                                             ^^
    give one of them a value of its own""",
    ),
    (
        "a tie to itself",
        "a -- R1 -- b; R1 = 2*R1",
        """\
line 1, column 20: R1 is tied to itself
    a -- R1 -- b; R1 = 2*R1
                       ^^^^
    give one of them a value of its own""",
    ),
    (
        "a tie to another kind of part",
        "a -- R1 -- b -- C1 -- gnd; R1 = C1",
        """\
line 1, column 33: R1 is in ohm, its value is in F
    a -- R1 -- b -- C1 -- gnd; R1 = C1
                                    ^^
    give R1 in ohm""",
    ),
    (
        "a tie to a voltage",
        "a -- R1 -- b; R1 = b",
        """\
line 1, column 20: b is a node, its name a voltage, and no value can depend on it
    a -- R1 -- b; R1 = b
                       ^
    a source that follows it is a law: hold out = ..., push into out = ...""",
    ),
    (
        "a tie to v_b",
        "a -- R1 -- b; R1 = 2*v_b",
        """\
line 1, column 22: v_b is the voltage of b and no value can depend on it
    a -- R1 -- b; R1 = 2*v_b
                         ^^^
    a source that follows it is a law: hold out = ..., push into out = ...""",
    ),
    (
        "s in the value of R",
        "a -- R1 -- b; R1 = 2*s",
        """\
line 1, column 22: s may stand in the value of Z and Y only
    a -- R1 -- b; R1 = 2*s
                         ^
    write an impedance: Z1 = R/(1 + s*R*C)""",
    ),
    (
        "a tie to something with s",
        "a -- R1 -- b -- Z1 -- gnd; Z1 = s*L; R1 = Z1",
        """\
line 1, column 43: R1 is tied to Z1, and Z1 contains s
    a -- R1 -- b -- Z1 -- gnd; Z1 = s*L; R1 = Z1
                                              ^^
    only Z and Y may have s in their value""",
    ),
    (
        "a name one edit away",
        "vin -- R1 -- vout; hold vout = mu*vinn",
        """\
line 1, column 35: vinn is not known
    vin -- R1 -- vout; hold vout = mu*vinn
                                      ^^^^
    did you mean vin? If it is meant as a free symbol, say: free vinn""",
    ),
    (
        "two letters exchanged",
        "a -- R1 -- b; gain = 3; hold b = gian*a",
        """\
line 1, column 34: gian is not known
    a -- R1 -- b; gain = 3; hold b = gian*a
                                     ^^^^
    did you mean gain? If it is meant as a free symbol, say: free gian""",
    ),
    (
        "a name in another case",
        "vin -- R1 -- b; hold b = mu*Vin",
        """\
line 1, column 29: Vin is not known
    vin -- R1 -- b; hold b = mu*Vin
                                ^^^
    did you mean vin? If it is meant as a free symbol, say: free Vin""",
    ),
    (
        "a part that is not there in a value",
        "a -- Z1 -- b -- R1 -- gnd; Z1 = R11 + s*L",
        """\
line 1, column 33: R11 is not known
    a -- Z1 -- b -- R1 -- gnd; Z1 = R11 + s*L
                                    ^^^
    did you mean R1? If it is meant as a free symbol, say: free R11""",
    ),
    (
        "pi",
        "a -- R1 -- b; R1 = 2*pi*R",
        """\
line 1, column 22: pi is no fraction, and values are exact fractions
    a -- R1 -- b; R1 = 2*pi*R
                         ^^
    give angular frequencies in rad/s""",
    ),
    (
        "a reserved word in an expression",
        "a -- R1 -- b; R1 = 2*drive",
        """\
line 1, column 22: drive is a word of the notation
    a -- R1 -- b; R1 = 2*drive
                         ^^^^^
    choose another name""",
    ),
    (
        "a bare number among ohms",
        "a -- Z1 -- b; Z1 = R + 100",
        """\
line 1, column 24: 100 is a number and R is in ohm: they cannot be added
    a -- Z1 -- b; Z1 = R + 100
                           ^^^
    100 has no unit; write 100 ohm""",
    ),
    (
        "ohms and farads",
        "a -- Z1 -- b; Z1 = R + C",
        """\
line 1, column 24: C is in F and R is in ohm: they cannot be added
    a -- Z1 -- b; Z1 = R + C
                           ^""",
    ),
    (
        "ohms and farads in parallel",
        "a -- Z1 -- b; Z1 = R || C",
        """\
line 1, column 25: C is in F and R is in ohm: they cannot be put in parallel
    a -- Z1 -- b; Z1 = R || C
                            ^""",
    ),
    (
        "a product beside ||",
        "a -- Z1 -- b; Z1 = R || 2*R",
        """\
line 1, column 25: 2 is a number and R is in ohm: they cannot be put in parallel
    a -- Z1 -- b; Z1 = R || 2*R
                            ^
    2 has no unit; write 2 ohm; || binds tighter than *, so a product beside it stands in parentheses""",
    ),
    (
        "numbers for nodes",
        "1 -- R1 -- 2; push into 1 = (1 - 2)/R1",
        """\
line 1, column 30: 1 is a number here; node 1 is v_1
    1 -- R1 -- 2; push into 1 = (1 - 2)/R1
                                 ^
    write v_1""",
    ),
    (
        "a number for a node beside a node",
        "1 -- R1 -- 2; hold 1 = v_2 - 1",
        """\
line 1, column 30: 1 is a number here; node 1 is v_1
    1 -- R1 -- 2; hold 1 = v_2 - 1
                                 ^
    write v_1""",
    ),
    (
        "a symbol where a voltage must stand",
        "a -- R1 -- b; hold b = mu*(a - n)",
        """\
line 1, column 32: n stands where a voltage must stand and the network has no node n
    a -- R1 -- b; hold b = mu*(a - n)
                                   ^
    nodes: a, b""",
    ),
    (
        "a symbol where a current must stand",
        "a -- R1 -- b; push into b = i_R1 - x",
        """\
line 1, column 36: x stands where a current must stand and the network has no part x
    a -- R1 -- b; push into b = i_R1 - x
                                       ^
    currents: i_R1""",
    ),
    (
        "a law without voltage",
        "a -- R1 -- b; hold b = K*x",
        """\
line 1, column 24: this hold has no voltage and no current in it
    a -- R1 -- b; hold b = K*x
                           ^^^
    it is a sum of voltages and currents, each with a factor""",
    ),
    (
        "a hidden source",
        "a -- R1 -- b; hold b = a + 5 V",
        """\
line 1, column 28: this term has no voltage and no current in it
    a -- R1 -- b; hold b = a + 5 V
                               ^^^
    every term is a voltage or current with a factor; a constant would be a hidden source""",
    ),
    (
        "a product of voltages",
        "a -- R1 -- b; hold b = a*b",
        """\
line 1, column 26: a product of two voltages or currents is not linear
    a -- R1 -- b; hold b = a*b
                             ^
    laws are linear""",
    ),
    (
        "a quotient of voltages",
        "a -- R1 -- b; hold b = K*a/b",
        """\
line 1, column 28: a voltage or current cannot be divided by
    a -- R1 -- b; hold b = K*a/b
                               ^
    laws are linear""",
    ),
    (
        "a square of a voltage",
        "a -- R1 -- b; hold b = a^2",
        """\
line 1, column 24: a power of a voltage or current is not linear
    a -- R1 -- b; hold b = a^2
                           ^^^""",
    ),
    (
        "voltages in parallel",
        "a -- R1 -- b; hold b = a || b",
        """\
line 1, column 24: || joins impedances, not voltages or currents
    a -- R1 -- b; hold b = a || b
                           ^^^^^^""",
    ),
    (
        "a push that is a voltage",
        "a -- R1 -- b; push into a = b",
        """\
line 1, column 29: a push gives a current (A); this is in V
    a -- R1 -- b; push into a = b
                                ^""",
    ),
    (
        "a hold that is a current",
        "a -- R1 -- b; hold a = i_R1",
        """\
line 1, column 24: a hold gives a voltage (V); this is in A
    a -- R1 -- b; hold a = i_R1
                           ^^^^""",
    ),
    (
        "a symbol used in two ways",
        "a -- R1 -- b; hold a = x*i_R1; push into b = x*a",
        """\
line 1, column 46: a push gives a current (A); this is in ohm*V
    a -- R1 -- b; hold a = x*i_R1; push into b = x*a
                                                 ^^^
    from what stands elsewhere, x is in ohm""",
    ),
    (
        "a symbol against its declaration",
        "a -- R1 -- b; free gm in S; hold a = gm*i_R1",
        """\
line 1, column 38: a hold gives a voltage (V); this is in S*A
    a -- R1 -- b; free gm in S; hold a = gm*i_R1
                                         ^^^^^^^""",
    ),
    (
        "a symbol without its unit",
        "a -- R1 -- b; gm = 2; push into b = gm*a",
        """\
line 1, column 20: gm is in S, its value is a number
    a -- R1 -- b; gm = 2; push into b = gm*a
                       ^
    write the unit: 2 S""",
    ),
    (
        "a root of a dimension",
        "a -- R1 -- b; hold a = x^2*i_R1",
        """\
line 1, column 24: no dimension fits x: it would be a root of one
    a -- R1 -- b; hold a = x^2*i_R1
                           ^
    check the powers it stands in""",
    ),
    (
        "a current of a part that is not there",
        "a -- Rin -- b; push into b = i_Rim",
        """\
line 1, column 30: i_Rim: the network has no part Rim
    a -- Rin -- b; push into b = i_Rim
                                 ^^^^^
    did you mean i_Rin?""",
    ),
    (
        "a voltage of a node that is not there",
        "a -- R1 -- b; hold b = v_c",
        """\
line 1, column 24: v_c: the network has no part or node c
    a -- R1 -- b; hold b = v_c
                           ^^^
    there are v_R1, v_a, v_b""",
    ),
    (
        "the name of a law in an expression",
        "a -- R1 -- b; hold b = amp*a as amp",
        """\
line 1, column 24: amp is a law
    a -- R1 -- b; hold b = amp*a as amp
                           ^^^
    its current is i_amp""",
    ),
    (
        "the voltage of a drive",
        "a -- R1 -- b; drive a as Vs; read v_Vs",
        """\
line 1, column 35: v_Vs: Vs is a drive
    a -- R1 -- b; drive a as Vs; read v_Vs
                                      ^^^^
    v_ goes with a part or a node""",
    ),
    (
        "gnd in an expression",
        "a -- R1 -- b; hold b = mu*(a - gnd)",
        """\
line 1, column 32: gnd is the reference, its voltage is 0
    a -- R1 -- b; hold b = mu*(a - gnd)
                                   ^^^
    leave it out""",
    ),
    (
        "import in a value",
        "R1 = __import__('os')",
        """\
line 1, column 6: a name begins with a letter
    R1 = __import__('os')
         ^
    names are made of letters, digits and _""",
    ),
    (
        "import in a law",
        "hold out = __import__('os')",
        """\
line 1, column 12: a name begins with a letter
    hold out = __import__('os')
               ^
    names are made of letters, digits and _""",
    ),
    (
        "import in a push",
        "push into out = __import__('os')",
        """\
line 1, column 17: a name begins with a letter
    push into out = __import__('os')
                    ^
    names are made of letters, digits and _""",
    ),
    (
        "import in a read",
        "read __import__('os')",
        """\
line 1, column 6: a name begins with a letter
    read __import__('os')
         ^
    names are made of letters, digits and _""",
    ),
    (
        "import in a drive",
        "drive __import__('os')",
        """\
line 1, column 7: a name begins with a letter
    drive __import__('os')
          ^
    names are made of letters, digits and _""",
    ),
    (
        "import in a chain",
        "a -- __import__('os') -- b",
        """\
line 1, column 6: a name begins with a letter
    a -- __import__('os') -- b
         ^
    names are made of letters, digits and _""",
    ),
    (
        "import in a chain's value",
        "a -- R1 = __import__('os') -- b",
        """\
line 1, column 11: a name begins with a letter
    a -- R1 = __import__('os') -- b
              ^
    names are made of letters, digits and _""",
    ),
    (
        "import in a terminal",
        "U1: opamp(plus=__import__('os'), minus=m, out=o)",
        """\
line 1, column 16: a name begins with a letter
    U1: opamp(plus=__import__('os'), minus=m, out=o)
                   ^
    names are made of letters, digits and _""",
    ),
    (
        "import in a tolerance",
        "R1 = 5 ±__import__('os')%",
        """\
line 1, column 9: a name begins with a letter
    R1 = 5 ±__import__('os')%
            ^
    names are made of letters, digits and _""",
    ),
    (
        "import in an exponent",
        "Z1 = R^__import__('os')",
        """\
line 1, column 8: an exponent is a whole number
    Z1 = R^__import__('os')
           ^
    such as s^2 or s^-1""",
    ),
    (
        "import in free",
        "free __import__('os')",
        """\
line 1, column 6: a name begins with a letter
    free __import__('os')
         ^
    names are made of letters, digits and _""",
    ),
    (
        "import in the name of a law",
        "hold out = 2*a as __import__('os')",
        """\
line 1, column 19: a name begins with a letter
    hold out = 2*a as __import__('os')
                      ^
    names are made of letters, digits and _""",
    ),
    (
        "import as a statement",
        "__import__('os')",
        """\
line 1, column 1: a name begins with a letter
    __import__('os')
    ^
    names are made of letters, digits and _""",
    ),
    (
        "a section without terminals",
        "define stage()\na -- R1 -- b\ndone",
        """\
line 1, column 14: there is nothing inside the parenthesis
    define stage()
                 ^""",
    ),
    (
        "a section without an end",
        "define stage(in, out)\n  in -- R1 -- out",
        """\
line 1, column 1: this definition has no end
    define stage(in, out)
    ^^^^^^^^^^^^^^^^^^^^^
    end it with the word done on a line of its own""",
    ),
    (
        "a section inside a section",
        "define stage(in, out)\ndefine t(in, out)\nin -- R1 -- out\ndone",
        """\
line 2, column 1: a definition stands inside another
    define t(in, out)
    ^^^^^^^^^^^^^^^^^
    end the one before with done; a section may place others, which are defined beside it""",
    ),
    (
        "a section defined twice",
        "define stage(in, out)\nin -- R1 -- out\ndone\ndefine stage(in, out)\nin -- R1 -- out\ndone",
        """\
line 4, column 1: stage is defined twice
    define stage(in, out)
    ^^^^^^^^^^^^^^^^^^^^^
    give one of them another name""",
    ),
    (
        "an empty section",
        "define stage(in, out)\ndone",
        """\
line 1, column 1: the section stage is empty
    define stage(in, out)
    ^^^^^^^^^^^^^^^^^^^^^
    write its parts between define and done""",
    ),
    (
        "a drive inside a section",
        "define stage(in, out)\nin -- R1 -- out\ndrive in\ndone",
        """\
line 3, column 1: a section is neither driven nor read by itself
    drive in
    ^^^^^^^^
    drive and read belong to the network that places it""",
    ),
    (
        "a terminal that nothing touches",
        "define stage(in, out, x)\nin -- R1 -- out\ndone",
        """\
line 1, column 1: nothing inside stage is connected to x
    define stage(in, out, x)
    ^^^^^^^^^^^^^^^^^^^^^^^^
    connect it, or leave it out""",
    ),
    (
        "a parameter that nothing hangs on",
        "define stage(in, out; R, k)\nin -- R -- out\ndone",
        """\
line 1, column 26: nothing inside stage hangs on k
    define stage(in, out; R, k)
                             ^
    use it, or leave it out""",
    ),
    (
        "a terminal named twice",
        "define stage(in, in)\nin -- R1 -- gnd\ndone",
        """\
line 1, column 18: in is a terminal twice
    define stage(in, in)
                     ^^
    name it once""",
    ),
    (
        "gnd as a terminal",
        "define stage(in, gnd)\nin -- R1 -- gnd\ndone",
        """\
line 1, column 18: gnd is the same inside and needs no terminal
    define stage(in, gnd)
                     ^^^
    leave it out""",
    ),
    (
        "a parameter named twice",
        "define stage(in; R, R)\nin -- R -- gnd\ndone",
        """\
line 1, column 21: R is a parameter twice
    define stage(in; R, R)
                        ^
    name it once""",
    ),
    (
        "a section placed in itself",
        "define stage(in, out)\nin -- R1 -- out\nA: stage(in=in, out=out)\ndone",
        """\
line 3, column 4: stage is placed in itself
    A: stage(in=in, out=out)
       ^^^^^
    a section may hold only others""",
    ),
    (
        "sections in a circle",
        "define stage(in, out)\nA: t(in=in, out=out)\ndone\ndefine t(in, out)\nA: stage(in=in, out=out)\ndone",
        """\
line 5, column 4: stage holds itself: stage -> t -> stage
    A: stage(in=in, out=out)
       ^^^^^
    a section may hold only others""",
    ),
    (
        "a wrong value of a parameter",
        "define stage(in; R = 10 nF)\nin -- R -- gnd\ndone",
        """\
line 1, column 22: R is in ohm, its value is in F
    define stage(in; R = 10 nF)
                         ^^^^^
    give R in ohm""",
    ),
    (
        "a wrong argument",
        "define stage(in; R)\nin -- R -- gnd\ndone\na -- R1 -- gnd\nA: stage(in=a, R=5 H)",
        """\
line 5, column 18: R is in ohm, its value is in H
    A: stage(in=a, R=5 H)
                     ^^^
    give R in ohm""",
    ),
    (
        "a misspelt section",
        "define lowpass(in; R)\nin -- R -- gnd\ndone\na -- R1 -- gnd\nA: lowpas(in=a, R=5k)",
        """\
line 5, column 4: lowpas is no device or section
    A: lowpas(in=a, R=5k)
       ^^^^^^
    did you mean lowpass?""",
    ),
    (
        "a misspelt parameter",
        "define lowpass(in; Ra)\nin -- Ra -- gnd\ndone\na -- R1 -- gnd\nA: lowpass(in=a, Rb=5k)",
        """\
line 5, column 18: a lowpass has no terminal or parameter Rb
    A: lowpass(in=a, Rb=5k)
                     ^^
    write A: lowpass(in=...), and if wanted Ra""",
    ),
    (
        "a terminal with a value",
        "define stage(in; R)\nin -- R -- gnd\ndone\na -- R1 -- gnd\nA: stage(in=5k, R=5k)",
        """\
line 5, column 13: in is connected to a node
    A: stage(in=5k, R=5k)
                ^^
    write its name""",
    ),
    (
        "a fault inside a section",
        "define stage(in, out)\nin -- R1 -- C1 -- out\ndone\nA: stage(in=a, out=b)\na -- R2 -- b",
        """\
line 2, column 13: C1 stands where a node must stand
    in -- R1 -- C1 -- out
                ^^
    did you leave out the node between R1 and C1, or mean R1 + C1?""",
    ),
    (
        "a name of the outside inside a section",
        "define stage(in, out)\nin -- R1 -- out\nR1 = 2*Rq1\ndone\na -- Rq -- b\nA: stage(in=a, out=b)",
        """\
line 3, column 8: Rq1 is not known
    R1 = 2*Rq1
           ^^^
    did you mean R1? If it is meant as a free symbol, say: free Rq1""",
    ),
    (
        "a section's name for a part",
        "define stage(in, out)\nin -- R1 -- out\ndone\nR5: stage(in=a, out=b)",
        """\
line 4, column 1: R5 cannot be the name of a device
    R5: stage(in=a, out=b)
    ^^
    names that begin with R are branches""",
    ),
    (
        "a placement with the name of a node",
        "define stage(in, out)\nin -- R1 -- out\ndone\na: stage(in=a, out=b)",
        """\
line 4, column 1: a is already the name of a section
    a: stage(in=a, out=b)
    ^^^^^^^^^^^^^^^^^^^^^
    choose another name""",
    ),
    (
        "two placements with one name",
        "define stage(in, out)\nin -- R1 -- out\ndone\nA: stage(in=a, out=b)\nA: stage(in=b, out=c)",
        """\
line 5, column 1: A is already the name of a section
    A: stage(in=b, out=c)
    ^^^^^^^^^^^^^^^^^^^^^
    choose another name""",
    ),
    (
        "a coupling of a coil that is not there",
        "couple L1 to L3 with k=0.5; a -- L1 -- gnd; a -- L2 -- gnd",
        """\
line 1, column 1: the network has no coil L3
    couple L1 to L3 with k=0.5; a -- L1 -- gnd; a -- L2 -- gnd
    ^^^^^^^^^^^^^^^^^^^^^^^^^^
    place it: a -- L3 -- b""",
    ),
    (
        "a coefficient above one",
        "couple L1 to L2 with k=1.5; a -- L1 -- gnd; a -- L2 -- gnd",
        """\
line 1, column 1: k = 1.5: a coupling coefficient lies between -1 and 1
    couple L1 to L2 with k=1.5; a -- L1 -- gnd; a -- L2 -- gnd
    ^^^^^^^^^^^^^^^^^^^^^^^^^^
    k = M/sqrt(L1 L2)""",
    ),
    (
        "a mutual inductance that is too large",
        "couple L1 to L2 with M=3 mH; a -- L1 = 1m -- gnd; a -- L2 = 2m -- gnd",
        """\
line 1, column 1: M = 3 mH is more than L1 and L2 allow
    couple L1 to L2 with M=3 mH; a -- L1 = 1m -- gnd; a -- L2 = 2m -- gnd
    ^^^^^^^^^^^^^^^^^^^^^^^^^^^
    M^2 is at most L1 L2: a coil pair stores no negative energy""",
    ),
    (
        "a coupling without k or M",
        "couple L1 to L2 with q; a -- L1 -- gnd; a -- L2 -- gnd",
        """\
line 1, column 22: q says not whether it is k or M
    couple L1 to L2 with q; a -- L1 -- gnd; a -- L2 -- gnd
                         ^
    write k or k12 for the coefficient, M or M12 for the mutual inductance""",
    ),
    (
        "a coupled capacitor",
        "couple L1 to C2 with k; a -- L1 -- gnd; a -- C2 -- gnd",
        """\
line 1, column 14: C2 is no coil
    couple L1 to C2 with k; a -- L1 -- gnd; a -- C2 -- gnd
                 ^^
    inductors are coupled: couple L1 to L2""",
    ),
    (
        "a coil coupled to itself",
        "couple L1 to L1 with k; a -- L1 -- gnd",
        """\
line 1, column 14: L1 is coupled to itself
    couple L1 to L1 with k; a -- L1 -- gnd
                 ^^
    name two coils""",
    ),
    (
        "coils coupled twice",
        "couple L1 to L2 with k; couple L2 to L1 with k2; a -- L1 -- gnd; a -- L2 -- gnd",
        """\
line 1, column 25: L2 and L1 are coupled already, by k
    couple L1 to L2 with k; couple L2 to L1 with k2; a -- L1 -- gnd; a -- L2 -- gnd
                            ^^^^^^^^^^^^^^^^^^^^^^^
    one coupling is enough""",
    ),
    (
        "one name for two couplings",
        "couple L1 to L2 with k; couple L2 to L3 with k\na -- L1 -- gnd; a -- L2 -- gnd; a -- L3 -- gnd",
        """\
line 1, column 25: k is the name of two couplings
    couple L1 to L2 with k; couple L2 to L3 with k
                            ^^^^^^^^^^^^^^^^^^^^^^
    each coupling has a name of its own; a common value is given by a tie: k2 = k1""",
    ),
    (
        "three coils that cannot be so close",
        "couple L1 to L2 with k12 = 0.9; couple L2 to L3 with k23 = 0.9\ncouple L1 to L3 with k13 = 0.1\na -- L1 -- gnd; a -- L2 -- gnd; a -- L3 -- gnd",
        """\
line 2, column 1: no coils can have the couplings k12, k13, k23 together
    couple L1 to L3 with k13 = 0.1
    ^^^^^^^^^^^^^^^^^^^^^^^^^^^^^^
    coils that are each close to a third are close to each other: check L1, L2, L3""",
    ),
    (
        "a mutual inductance in ohm",
        "couple L1 to L2 with M = 5 ohm; a -- L1 -- gnd; a -- L2 -- gnd",
        """\
line 1, column 26: M is in H, its value is in ohm
    couple L1 to L2 with M = 5 ohm; a -- L1 -- gnd; a -- L2 -- gnd
                             ^^^^^
    give M in H""",
    ),
    (
        "a coupling with a coil in the wrong place",
        "couple L1 with L2; a -- L1 -- gnd",
        """\
line 1, column 11: with is not expected in this couple statement
    couple L1 with L2; a -- L1 -- gnd
              ^^^^
    write: couple L1 to L2 with k = 0.98, or with M = 1 mH""",
    ),
    (
        "a coupling without a value",
        "couple L1 to L2; a -- L1 -- gnd",
        """\
line 1, column 16: this couple statement is not complete
    couple L1 to L2; a -- L1 -- gnd
                   ^
    write: couple L1 to L2 with k = 0.98, or with M = 1 mH""",
    ),
)
