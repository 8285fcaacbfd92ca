#!/bin/sh
# run.sh BUILD: what prove finds. Every file of a sealed copy with one byte changed, a file more, a
# file less; seals.txt with lines changed, dropped, swapped and cut; a publish after the seal; the
# owner taken out of the job file; sha256sum and ssh-keygen, which share no code with the program.
set -eu
build=$(cd "$1" && pwd)
here=$(cd "$(dirname "$0")" && pwd)
root=$(cd "$here/../.." && pwd)
work=$build/tests/seal
gridleak=$build/gridleak
rm -rf "$work"
mkdir -p "$work"
cp -r "$root/jobs-example" "$work/shop"
cd "$work"
checks=0
fail() {
    echo "FAIL: $*"
    exit 1
}
# says STATUS PATTERN COMMAND...: its exit status and one line of what it says.
says() {
    wanted=$1
    pattern=$2
    shift 2
    status=0
    "$@" >out 2>&1 || status=$?
    [ "$status" = "$wanted" ] || { cat out; fail "exit $status, not $wanted: $*"; }
    grep -q -e "$pattern" out || { cat out; fail "'$pattern' is not said by: $*"; }
    checks=$((checks + 1))
}

"$gridleak" publish -q shop -o output >publish.log 2>&1
says 0 'not sealed' "$gridleak" prove output/jobs/2031-014/client
says 2 'publish first' "$gridleak" seal shop/2037-019.yaml client -o output # still in progress
says 0 'sealed/2031-014-client-1' "$gridleak" seal shop/2031-014.yaml client -o output
says 0 'sealed/2031-014-sale-1' "$gridleak" seal shop/2031-014.yaml sale -o output
says 0 'sealed/2032-021-sale-1' "$gridleak" seal shop/2032-021.yaml sale -o output
says 0 'sealed/2031-014-sale-2' "$gridleak" seal shop/2031-014.yaml sale -o output
[ "$(wc -l <shop/seals.txt)" = 4 ] || fail "seals.txt has not four lines"
sealed=shop/sealed/2031-014-sale-1
says 0 'sealed, chain of 4 checked' "$gridleak" prove $sealed
for folder in shop/sealed/*; do
    (cd "$folder" && sha256sum --quiet -c manifest.sha256) || fail "sha256sum disagrees in $folder"
    last=$(grep -F " sealed/$(basename "$folder") " shop/seals.txt)
    [ "$last" = "$(cat "$folder/seal.txt")" ] || fail "seal.txt of $folder is not its line"
    [ "$(sha256sum <"$folder/manifest.sha256" | cut -d' ' -f1)" = "$(echo "$last" | cut -d' ' -f4)" ] ||
        fail "the line of $folder does not hold its manifest"
    checks=$((checks + 1))
done
# The chain, recomputed: each line holds the hash of the one before it.
before=0000000000000000000000000000000000000000000000000000000000000000
while read -r line; do
    [ "$(echo "$line" | cut -d' ' -f5)" = "$before" ] || fail "not a chain: $line"
    before=$(printf %s "$line" | sha256sum | cut -d' ' -f1)
done <shop/seals.txt

# flip FILE: one bit of the byte in its middle.
flip() {
    python3 - "$1" <<'PY'
import sys
with open(sys.argv[1], "r+b") as file:
    data = file.read()
    at = len(data) // 2
    file.seek(at)
    file.write(bytes([data[at] ^ 1]))
PY
}

# One byte of each file in turn.
find "$sealed" -type f | LC_ALL=C sort >files
[ "$(wc -l <files)" -ge 8 ] || fail "a sealed copy has only $(wc -l <files) files"
while read -r file; do
    cp "$file" kept
    flip "$file"
    case $file in
    */manifest.sha256) pattern='manifest is not the one sealed' ;;
    */seal.txt) pattern='seal' ;;
    *) pattern="changed: ${file#"$sealed"/}" ;;
    esac
    says 1 "$pattern" "$gridleak" prove $sealed
    cp kept "$file"
done <files
says 0 'chain of 4 checked' "$gridleak" prove $sealed

# A file more, also in a folder; a file less; a manifest less.
echo note >$sealed/note.txt
says 1 'added: note.txt' "$gridleak" prove $sealed
rm $sealed/note.txt
echo note >$sealed/pictures/.hidden
says 1 'added: pictures/.hidden' "$gridleak" prove $sealed
rm $sealed/pictures/.hidden
picture=$(cd $sealed && ls pictures/* | head -n 1)
mv "$sealed/$picture" kept
says 1 "lost: $picture" "$gridleak" prove $sealed
mv kept "$sealed/$picture"
mv $sealed/manifest.sha256 kept
says 1 'no manifest.sha256' "$gridleak" prove $sealed
mv kept $sealed/manifest.sha256
# A file changed and its line in the manifest with it: the seal still holds the old manifest.
cp $sealed/2031-014.md kept
cp $sealed/manifest.sha256 kept.manifest
sed -i 's/Pellworth/Pellwurth/' $sealed/2031-014.md
(cd $sealed && sha256sum $(cut -c67- manifest.sha256)) >new.manifest
cp new.manifest $sealed/manifest.sha256
says 1 'manifest is not the one sealed' "$gridleak" prove $sealed
cp kept $sealed/2031-014.md
cp kept.manifest $sealed/manifest.sha256
# findings.json exchanged and the manifest made anew, outside the archive: the fingerprint tells.
cp -r output/jobs/2031-014/client alone
sed -i 's/"job":"2031-014"/"job":"2031-015"/' alone/findings.json
(cd alone && sha256sum $(cut -c67- manifest.sha256)) >new.manifest
cp new.manifest alone/manifest.sha256
says 1 'fingerprint' "$gridleak" prove alone

# The chain.
cp shop/seals.txt seals
chain() { # WHAT PATTERN: seals.txt as it now is
    says 1 "$2" "$gridleak" prove $sealed
    cp seals shop/seals.txt
}
sed -i '1s/2031-014-client-1/2031-014-client-9/' shop/seals.txt
chain 'line edited' 'chain breaks: seals.txt, line 2'
sed -i 2d shop/seals.txt
chain 'line dropped' 'chain breaks: seals.txt, line 2'
sed -i 1d shop/seals.txt
chain 'first line dropped' 'chain breaks: seals.txt, line 1'
{ sed -n 1p seals; sed -n 3p seals; sed -n 2p seals; sed -n 4p seals; } >shop/seals.txt
chain 'lines swapped' 'chain breaks: seals.txt, line 2'
sed -i '3s/ 20[0-9][0-9]-/ 1999-/' shop/seals.txt
chain 'date changed' 'chain breaks: seals.txt, line 4'
: >shop/seals.txt
chain 'all lines gone' 'seal is not in its place: seals.txt, line 2'
head -n 1 seals >shop/seals.txt
chain 'cut behind an older line' 'seal is not in its place: seals.txt, line 2'
for line in 1 2 3 4; do
    # Every byte of a line matters: flip one in the middle of each.
    python3 - shop/seals.txt $line <<'PY'
import sys
path, number = sys.argv[1], int(sys.argv[2])
lines = open(path).read().splitlines(True)
text = lines[number - 1]
at = len(text) // 2
lines[number - 1] = text[:at] + ("0" if text[at] != "0" else "1") + text[at + 1:]
open(path, "w").write("".join(lines))
PY
    cp shop/seals.txt changed
    if [ $line = 4 ]; then # nothing follows the last line: the folder it names tells
        says 1 'seal is not in its place' "$gridleak" prove shop/sealed/2031-014-sale-2
        cp seals shop/seals.txt
    else
        chain "line $line" 'chain breaks: seals.txt'
    fi
done
# Nothing is sealed behind a broken chain, and a copy that was changed is not sealed.
sed -i '1s/client-1/client-9/' shop/seals.txt
says 2 'prove says where' "$gridleak" seal shop/2032-021.yaml client -o output
cp seals shop/seals.txt
cp output/jobs/2032-021/client/findings.json kept
flip output/jobs/2032-021/client/findings.json
says 2 'not as it was published' "$gridleak" seal shop/2032-021.yaml client -o output
cp kept output/jobs/2032-021/client/findings.json

# The owner is erased from the job file: sealed copies still prove, and publish leaves them alone.
find shop/sealed -type f -printf '%p %s %T@\n' | LC_ALL=C sort >stamps
grep -q 'M. Thirlaway' shop/2031-014.yaml || fail "the example has another owner"
sed -i '/^owner:/,/^  contact:/d' shop/2031-014.yaml
"$gridleak" publish -q shop -o output >publish.log 2>&1
find shop/sealed -type f -printf '%p %s %T@\n' | LC_ALL=C sort | cmp - stamps || fail "publish touched a sealed folder"
! grep -r -q 'Thirlaway' output/jobs/2031-014 || fail "the owner is still in the output"
for folder in shop/sealed/*; do
    says 0 'chain of 4 checked' "$gridleak" prove "$folder"
done
! grep -r -q 'Thirlaway' shop/sealed/2031-014-sale-1 || fail "the owner is in a copy for sale"

# A detached signature, as `gridleak seal --help` says: signed, kept through prove, refused when false.
"$gridleak" seal --help | grep -q 'ssh-keygen -Y sign' || fail "the help does not speak of signing"
ssh-keygen -q -t ed25519 -N '' -f key -C shop
ssh-keygen -q -Y sign -f key -n gridleak $sealed/manifest.sha256
says 0 'chain of 4 checked' "$gridleak" prove $sealed
echo "shop $(cat key.pub)" >signers
says 0 'Good' sh -c "ssh-keygen -Y verify -f signers -I shop -n gridleak -s $sealed/manifest.sha256.sig <$sealed/manifest.sha256"
cp $sealed/manifest.sha256 kept
flip $sealed/manifest.sha256
says 255 'incorrect\|not\|Could' sh -c "ssh-keygen -Y verify -f signers -I shop -n gridleak -s $sealed/manifest.sha256.sig <$sealed/manifest.sha256"
cp kept $sealed/manifest.sha256
# Eight at once, of two jobs: each gets its line. One was killed before: what it left aside goes.
mkdir shop/sealed/.part-77
lines=$(($(wc -l <shop/seals.txt) + 8))
for turn in 1 2 3 4; do
    "$gridleak" seal shop/2031-014.yaml sale -o output >sealed.$turn 2>&1 &
    "$gridleak" seal shop/2032-021.yaml client -o output >sealed.2$turn 2>&1 &
done
wait
[ "$(wc -l <shop/seals.txt)" = $lines ] || fail "not $lines lines: $(cat sealed.*)"
for folder in shop/sealed/*; do
    says 0 "chain of $lines checked" "$gridleak" prove "$folder"
done
[ ! -e shop/sealed/.part-77 ] || fail "left aside in sealed/"
echo "seal: $checks checks, $(wc -l <files) files flipped"
