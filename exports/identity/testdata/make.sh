#!/bin/sh
# Makes the PKCS#12 files of the tests with OpenSSL 3. The passphrase of each is "pass"; the keys are for tests only.
# usage: sh make.sh
set -e
cd "$(dirname "$0")"
T=$(mktemp -d)
ca() { # name subject
  openssl req -x509 -newkey rsa:2048 -nodes -keyout "$T/$1.key" -out "$T/$1.crt" -subj "$2" -days 7300 -addext keyUsage=keyCertSign 2>/dev/null
}
issue() { # name subject ca extensions
  openssl req -new -key "$T/$1.key" -out "$T/$1.csr" -subj "$2" 2>/dev/null
  printf '%s\n' "$4" > "$T/ext"
  openssl x509 -req -in "$T/$1.csr" -CA "$T/$3.crt" -CAkey "$T/$3.key" -out "$T/$1.crt" -days 7000 -extfile "$T/ext" 2>/dev/null
}
alone() { # name subject: a certificate signed by its own key
  openssl req -x509 -key "$T/$1.key" -out "$T/$1.crt" -subj "$2" -days 7000 2>/dev/null
}
p12() { # file, then options
  f=$1; shift; openssl pkcs12 -export -passout pass:pass -out "$f.p12" "$@"
}
S=keyUsage=digitalSignature,nonRepudiation
ca root "/CN=Root"
openssl genrsa -out "$T/mid.key" 2048 2>/dev/null
issue mid "/CN=Issuing" root "basicConstraints=critical,CA:true"
openssl ecparam -name prime256v1 -genkey -noout -out "$T/ec.key"
issue ec "/CN=Dana Fields/title=Analyst/O=Example Works" mid "$S"
ca foreign "/CN=Foreign"
cat "$T/root.crt" "$T/foreign.crt" "$T/mid.crt" > "$T/more.pem"
p12 chain -inkey "$T/ec.key" -in "$T/ec.crt" -certfile "$T/more.pem"
p12 legacy -legacy -inkey "$T/ec.key" -in "$T/ec.crt" -certfile "$T/mid.crt"
p12 nomac -nomac -inkey "$T/ec.key" -in "$T/ec.crt"
p12 nokey -nokeys -in "$T/ec.crt"
p12 nocert -nocerts -inkey "$T/ec.key"
openssl genpkey -algorithm ed25519 -out "$T/ed.key"; alone ed "/CN=Ed"; p12 ed25519 -inkey "$T/ed.key" -in "$T/ed.crt"
openssl genrsa -out "$T/small.key" 1024 2>/dev/null; alone small "/CN=Small"; p12 rsa1024 -inkey "$T/small.key" -in "$T/small.crt"
openssl genrsa -out "$T/rsa.key" 2048 2>/dev/null; alone rsa "/CN=Rae"; p12 rsa -inkey "$T/rsa.key" -in "$T/rsa.crt"
openssl ecparam -name secp224r1 -genkey -noout -out "$T/p224.key"; alone p224 "/CN=Short"; p12 p224 -inkey "$T/p224.key" -in "$T/p224.crt"
openssl ecparam -name prime256v1 -genkey -noout -out "$T/anon.key"; alone anon "/O=Nobody"; p12 noname -inkey "$T/anon.key" -in "$T/anon.crt"
openssl ecparam -name prime256v1 -genkey -noout -out "$T/enc.key"
issue enc "/CN=Enc" root "keyUsage=keyAgreement"; p12 usage -inkey "$T/enc.key" -in "$T/enc.crt"
rm -rf "$T"
