/**
 * Passwords everybody tries first, of eight characters and more, in lower case: written down from common knowledge.
 * Years, digits and marks at the ends are taken off before the look-up, so only the stems stand here.
 */
const words = `
password passwort passwords passcode passphrase passw0rd p4ssword pa55word pa55w0rd p4ssw0rd motdepasse contrasena
wachtwoord parola senha haslo lozinka salasana losenord adgangskode
welcome welcomeback letmein letmeinnow iloveyou iloveu lovelove loveyou loveme trustno changeme changeit default
administrator admin adminadmin rootroot superuser sysadmin manager guest guestguest user username testtest testing
testuser temporary temptemp secret secretsecret topsecret private access accessdenied login loginlogin signin
qwerty qwertyui qwertyuiop qwertyuio qwertz qwertzui qwertzuiop azerty azertyui azertyuiop asdfgh asdfghjk asdfghjkl
asdfasdf zxcvbn zxcvbnm zxcvbnmasdf qazwsx qazwsxedc qazxsw qweasd qweasdzxc qweqwe qwerqwer qwertyqwerty zaqxsw
abcdef abcdefg abcdefgh abcdefghi abcdefghij abcabc aabbcc aaaabbbb abcd efgh abcdabcd xyzxyz
sunshine princess football baseball basketball softball volleyball swimming hockey soccer tennis golfing
dragon dragons monkey monkeys shadow shadows master masters superman batman spiderman ironman wonderwoman
starwars startrek pokemon pikachu minecraft computer internet hello helloworld hellohello
goodmorning goodnight goodluck blessed blessing jesuschrist jesus christ heaven angels angel babygirl babyboy
sweetheart darling honey sugar cookie cookies chocolate cupcake strawberry banana cherry orange pineapple
butterfly flower flowers rainbow unicorn diamond crystal silver golden purple yellow summer winter autumn spring
january february march april june july august september october november december
monday tuesday wednesday thursday friday saturday sunday
michael michelle jennifer jessica ashley amanda daniel thomas jordan joshua matthew andrew robert william anthony
charlie nicole justin jasmine samantha elizabeth stephanie victoria alexander alexandra christopher nicholas
benjamin patrick richard charles maverick hunter ranger buster killer tigger pepper ginger maggie bailey
freedom liberty america american england australia canada germany deutschland france london newyork chicago texas
california colorado alaska dallas arizona phoenix
whatever nothing something anything nobody everybody forever together remember whoami idontknow noidea
fuckyou fuckoff bullshit asshole biteme
mustangs motorcycle motorcycles motorbike motorrad moto scooter biker bikers bikerboy bikergirl rider riders
riding twowheels throttle fullthrottle vtwin chopper choppers cruiser cruisers roadtrip highway freeway
engine engineoil oilchange sparkplug crankcase crankshaft camshaft gearbox primary clutch brakes brakepad tires tyres
garage mechanic mechanics workshop service services servicebook logbook maintenance wrench wrenches torque
bigtwin twostroke fourstroke dirtbike quadbike supermoto enduro touring
whiskey whisky tequila rockandroll rocknroll blackmetal heavymetal guitar drummer
champion champions winner winners football footballer hooligan
cowboys eagles raiders warriors panthers bulldogs wildcats tigers
mother father brother sister family familia mommy daddy grandma grandpa
money moneymoney dollar dollars million millionaire business office company enterprise
windows keyboard monitor laptop smartphone
correcthorsebatterystaple
`;

const runs = `
12345678 123456789 1234567890 0123456789 01234567 87654321 987654321 9876543210 0987654321 23456789 98765432
11223344 1122334455 112233445566 12121212 123123123 1231231234 123123 12341234 123412345 1234512345 12345612
13579246 1357924680 24681357 2468013579 10203040 1020304050 11112222 22223333 11111112 12344321 1234554321 147258369
147852369 159753456 159357456 321654987 741852963 789456123 963852741 456789123 369258147 78945612 14725836 96385274
1q2w3e4r 1q2w3e4r5t 1q2w3e4r5t6y q1w2e3r4 q1w2e3r4t5 1qaz2wsx 1qaz2wsx3edc zaq12wsx zaq1xsw2 2wsx3edc 1qazxsw2
qwer1234 asdf1234 zxcv1234 1234qwer 1234asdf 1234abcd abcd1234 abc12345 a1b2c3d4 a1b2c3d4e5 aa123456 a1234567
a12345678 q1234567 qwe123qwe asd123asd pass1234 pass12345 pass123word test1234 user1234 admin123 root1234
19841984 20002000 20202020 20242024 20252025 69696969 31415926 314159265 27182818 18273645 55555555
`;

const split = (text: string) => text.split(/\s+/).filter(Boolean);
export const weakWords: ReadonlySet<string> = new Set(split(words));
export const weakPasswords: ReadonlySet<string> = new Set(split(runs));
