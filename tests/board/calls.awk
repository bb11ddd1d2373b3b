# What functions call and how deep the stack gets, from the text of objdump -d --no-show-raw-insn of a linked program.
#   roots, cut   names of functions, between blanks: where to begin, where not to go on
# Prints "calls NAME" for every function that is reached, and "stack BYTES": the deepest way, each function counted with
# all that it pushes or takes from the stack pointer. What cannot be followed is told: "pointer NAME", "recursion NAME",
# "missing NAME". Functions are known by their addresses: static ones may share a name.
function plain(name) {
    sub(/\.(constprop|isra|part)\.[0-9]+.*/, "", name)
    return name
}
function number(hexadecimal, i, x) {
    sub(/^0x/, "", hexadecimal)
    for (i = 1; i <= length(hexadecimal); ++i)
        x = 16 * x + index("0123456789abcdef", substr(hexadecimal, i, 1)) - 1
    return x + 0
}
function registers(line, part, ends, n, i, count) { # {r4, r5-r7, lr}
    sub(/^[^{]*{/, "", line)
    sub(/}.*/, "", line)
    gsub(/ /, "", line)
    count = n = split(line, part, ",")
    for (i = 1; i <= n; ++i)
        if (split(part[i], ends, "-") == 2)
            count += substr(ends[2], 2) - substr(ends[1], 2)
    return count
}
function depth(at, i, n, called, deepest, below) {
    if (at in known)
        return known[at]
    if (at in open) {
        print "recursion " name[at]
        return 0
    }
    open[at] = 1
    print "calls " name[at]
    if (at in pointer)
        print "pointer " name[at]
    n = split(callees[at], called, " ")
    for (i = 1; i <= n; ++i)
        if (index(" " cut " ", " " plain(name[called[i]]) " ") == 0) {
            below = depth(called[i])
            deepest = below > deepest ? below : deepest
        }
    delete open[at]
    return known[at] = frame[at] + deepest
}
/^[0-9a-f]+ <.*>:$/ {
    now = $1
    sub(/^0+/, "", now)
    name[now] = substr($2, 2, length($2) - 3)
    place[name[now]] = now
    next
}
/^ *[0-9a-f]+:\t\.word/ {
    address = $1
    sub(/:/, "", address)
    word[address] = $3
}
/^ *[0-9a-f]+:\t(push|stmdb|stmfd)/ && ($2 ~ /^push/ || $3 ~ /^sp!/) { frame[now] += 4 * registers($0) }
/^ *[0-9a-f]+:\tvpush/ { frame[now] += (/{d/ ? 8 : 4) * registers($0) }
/^ *[0-9a-f]+:\tsub[a-z.]*\tsp, / {
    bytes = $0
    sub(/.*#/, "", bytes)
    frame[now] += bytes + 0
}
/^ *[0-9a-f]+:\tstr.*\[sp, #-[0-9]+\]!/ {
    bytes = $0
    sub(/.*#-/, "", bytes)
    frame[now] += bytes + 0
}
# A large frame on a Cortex-M0: a negative constant is fetched and added.
/^ *[0-9a-f]+:\tldr[a-z.]*\tr[0-9]+, \[pc, / {
    address = $0
    sub(/.*@ \(/, "", address)
    sub(/[^0-9a-f].*/, "", address)
    constant[substr($3, 1, length($3) - 1)] = address
}
/^ *[0-9a-f]+:\tadd\tsp, r/ { added[now] = added[now] " " constant[$4] }
/^ *[0-9a-f]+:\tblx\tr/ { pointer[now] = 1 }
/^ *[0-9a-f]+:\t(b|bl|b[a-z][a-z])(\.[nw])?\t[0-9a-f]+ <.*>$/ {
    target = substr($4, 2, length($4) - 2)
    if (target ~ /\+0x/) {
        sub(/\+0x.*/, "", target)
        goal = target == name[now] ? now : "in " target
    } else {
        goal = $3
    }
    if (goal != now && !((now, goal) in seen)) {
        seen[now, goal] = 1
        callees[now] = callees[now] "\n" goal
    }
}
END {
    for (at in added) {
        n = split(added[at], addresses, " ")
        for (i = 1; i <= n; ++i)
            if (number(word[addresses[i]]) >= 2147483648)
                frame[at] += 4294967296 - number(word[addresses[i]])
    }
    for (at in callees) { # jumps into the middle of another function
        n = split(callees[at], jump, "\n")
        callees[at] = ""
        for (i = 2; i <= n; ++i)
            callees[at] = callees[at] " " (jump[i] ~ /^in / ? place[substr(jump[i], 4)] : jump[i])
    }
    n = split(roots, root, " ")
    for (i = 1; i <= n; ++i) {
        if (!(root[i] in place)) {
            print "missing " root[i]
            continue
        }
        deepest = depth(place[root[i]])
        most = deepest > most ? deepest : most
    }
    print "stack " most + 0
}
