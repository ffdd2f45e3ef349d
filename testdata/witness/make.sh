#!/bin/sh
# Makes a small time-stamping authority for tests and its replies.
# usage: make.sh DIGEST FOLDER, the digest (64 hexadecimal digits) being that
# of the seal that the tests make. Keys are made anew and not kept.
set -eu
digest=$1; out=$2
work=$(mktemp -d); cd "$work"
root() { # name, subject
  openssl req -x509 -newkey rsa:2048 -nodes -keyout "$1.key" -out "$1.pem" -days 36500 -subj "$2" \
    -addext basicConstraints=critical,CA:true -addext keyUsage=critical,keyCertSign 2>/dev/null
}
leaf() { # name, key option, usage, days, name of the root
  openssl req -newkey $2 -nodes -keyout "$1.key" -out "$1.csr" -subj "/O=Invented for tests/CN=Test stamp $1" 2>/dev/null
  printf 'basicConstraints=CA:false\nkeyUsage=critical,digitalSignature\nextendedKeyUsage=%s\n' "$3" >ext
  openssl x509 -req -in "$1.csr" -CA "$5.pem" -CAkey "$5.key" -set_serial "0x$(openssl rand -hex 8)" -days "$4" -extfile ext -out "$1.pem" 2>/dev/null
}
reply() { # name, digest of signing, digest that is stamped
  openssl ts -query -sha256 -cert -no_nonce -digest "$3" -out q.tsq 2>/dev/null
  printf '[tsa]\ndefault_tsa=t\n[t]\nserial=serial\nsigner_digest=%s\ndefault_policy=1.2.3.4\ndigests=sha256\naccuracy=secs:1\ness_cert_id_chain=no\n' "$2" >ts.cnf
  echo 01 >serial
  openssl ts -reply -config ts.cnf -queryfile q.tsq -inkey "$1.key" -signer "$1.pem" -out "$4" 2>/dev/null
}
root ca "/O=Invented for tests/CN=Test authority"
root other "/O=Invented for tests/CN=Another test authority"
leaf rsa rsa:2048 critical,timeStamping 36000 ca
openssl ecparam -name prime256v1 -out p256.pem
leaf ecdsa ec:p256.pem critical,timeStamping 36000 ca
cp ca.pem other.pem "$out"
reply rsa sha256 "$digest" "$out/rsa.tsr"
reply rsa sha384 "$digest" "$out/rsa384.tsr"
reply ecdsa sha512 "$digest" "$out/ecdsa.tsr"
reply rsa sha256 "$(printf %064d 0)" "$out/elsewhere.tsr"
# What openssl ts refuses to make: the same time stamp, signed by certificates
# for something else or of another time, or by RSA-PSS.
leaf usage rsa:2048 critical,codeSigning 36000 ca
leaf uncritical rsa:2048 timeStamping 36000 ca
leaf expired rsa:2048 critical,timeStamping -1 ca
signed() { # certificate, file, further options
  c=$1; f=$2; shift 2
  openssl cms -sign -binary -nodetach -cades -md sha256 -econtent_type 1.2.840.113549.1.9.16.1.4 \
    -in info.der -signer "$c.pem" -inkey "$c.key" -outform DER -out "$out/$f" "$@"
}
openssl ts -reply -in "$out/rsa.tsr" -token_out -out "$out/rsa.tst" 2>/dev/null
openssl cms -verify -noverify -inform DER -in "$out/rsa.tst" -out info.der -binary 2>/dev/null
for c in usage uncritical expired; do signed $c $c.tst; done
signed rsa pss.tst -keyopt rsa_padding_mode:pss -keyopt rsa_pss_saltlen:digest
openssl x509 -in ca.pem -outform DER -out "$out/ca.der"
openssl ts -verify -digest "$digest" -in "$out/rsa.tsr" -CAfile ca.pem
rm -r "$work"
