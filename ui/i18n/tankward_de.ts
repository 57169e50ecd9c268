<?xml version="1.0" encoding="utf-8"?>
<!DOCTYPE TS>
<TS version="2.1" language="de_DE" sourcelanguage="en">
<context>
    <name>Cautions</name>
    <message>
        <source>Ammonia</source>
        <translation>Ammoniak</translation>
    </message>
    <message>
        <source>Gives off ammonia gas, the more so warm or above pH 9. Extraction on, goggles and gloves; no hypochlorite anywhere near.</source>
        <translation>Gibt Ammoniakgas ab, warm oder über pH 9 umso mehr. Absaugung an, Schutzbrille und Handschuhe; kein Hypochlorit in der Nähe.</translation>
    </message>
    <message>
        <source>Cyanide</source>
        <translation>Cyanid</translation>
    </message>
    <message>
        <source>Deadly if swallowed or breathed; any acid, acid salt or ammonium salt sets hydrogen cyanide free. Never alone, never below pH 11, gas alarm working, site medical plan at hand.</source>
        <translation>Tödlich beim Verschlucken oder Einatmen; jede Säure, jedes saure Salz und jedes Ammoniumsalz setzt Blausäure frei. Nie allein, nie unter pH 11, Gaswarner in Betrieb, Notfallplan des Betriebs zur Hand.</translation>
    </message>
    <message>
        <source>Caustic</source>
        <translation>Lauge</translation>
    </message>
    <message>
        <source>Burns skin and eyes and heats as it dissolves. Face shield; caustic into water in small lots, never the reverse; let it cool between lots.</source>
        <translation>Verätzt Haut und Augen und erhitzt sich beim Lösen. Gesichtsschutz; Lauge in kleinen Mengen ins Wasser, nie umgekehrt; dazwischen abkühlen lassen.</translation>
    </message>
    <message>
        <source>Acid</source>
        <translation>Säure</translation>
    </message>
    <message>
        <source>Burns and splashes; foams with carbonate. Face shield; acid into water, never the reverse; keep it away from cyanide, sulfite and hypochlorite.</source>
        <translation>Verätzt und spritzt; schäumt mit Carbonat. Gesichtsschutz; Säure ins Wasser, nie umgekehrt; fern von Cyanid, Sulfit und Hypochlorit halten.</translation>
    </message>
    <message>
        <source>Formaldehyde</source>
        <translation>Formaldehyd</translation>
    </message>
    <message>
        <source>Irritates, sensitises and can cause cancer. Extraction on, gloves and goggles; keep it away from strong acid.</source>
        <translation>Reizt, sensibilisiert und kann Krebs erzeugen. Absaugung an, Handschuhe und Schutzbrille; fern von starker Säure halten.</translation>
    </message>
    <message>
        <source>Nickel salts</source>
        <translation>Nickelsalze</translation>
    </message>
    <message>
        <source>Sensitises skin and airways for life and can cause cancer as dust or mist. No dust, no bare skin; wash before eating.</source>
        <translation>Sensibilisiert Haut und Atemwege auf Lebenszeit und kann als Staub oder Nebel Krebs erzeugen. Kein Staub, keine bloße Haut; vor dem Essen waschen.</translation>
    </message>
    <message>
        <source>Cadmium</source>
        <translation>Cadmium</translation>
    </message>
    <message>
        <source>Harms kidneys and lungs and can cause cancer. No dust, no mist, no food nearby; the site's medical checks apply.</source>
        <translation>Schädigt Nieren und Lunge und kann Krebs erzeugen. Kein Staub, kein Nebel, keine Lebensmittel in der Nähe; es gelten die Vorsorgeuntersuchungen des Betriebs.</translation>
    </message>
    <message>
        <source>Oxidiser</source>
        <translation>Oxidationsmittel</translation>
    </message>
    <message>
        <source>Reacts hard with cyanide, ammonia, reducers and anything organic. Dilute first, add slowly, store apart.</source>
        <translation>Reagiert heftig mit Cyanid, Ammoniak, Reduktionsmitteln und allem Organischen. Erst verdünnen, langsam zugeben, getrennt lagern.</translation>
    </message>
    <message>
        <source>Hypophosphite</source>
        <translation>Hypophosphit</translation>
    </message>
    <message>
        <source>A reducer: a large or hot dose can run away with hydrogen. Small steps into a moving bath below its dosing temperature; no ignition source.</source>
        <translation>Ein Reduktionsmittel: Eine große oder heiße Zugabe kann unter Wasserstoffentwicklung durchgehen. Kleine Schritte ins bewegte Bad unterhalb der Zugabetemperatur; keine Zündquelle.</translation>
    </message>
    <message>
        <source>Hot liquor</source>
        <translation>Heißes Bad</translation>
    </message>
    <message>
        <source>Scalds, mists and boils up when water or solids go in fast. Let it cool as the procedure says, add slowly, keep freeboard.</source>
        <translation>Verbrüht, nebelt und kocht auf, wenn Wasser oder Feststoffe schnell hineinkommen. Nach Vorschrift abkühlen lassen, langsam zugeben, Freibord halten.</translation>
    </message>
    <message>
        <source>Ventilation</source>
        <translation>Lüftung</translation>
    </message>
    <message>
        <source>Prove that extraction runs before heating or dosing; stop when it fails.</source>
        <translation>Vor Heizen oder Zugeben prüfen, dass die Absaugung läuft; bei Ausfall aufhören.</translation>
    </message>
    <message>
        <source>Barium and fluoride</source>
        <translation>Barium und Fluorid</translation>
    </message>
    <message>
        <source>Barium salts and fluorides poison when swallowed or breathed; fluoride with acid gives hydrogen fluoride. Gloves, no dust; keep the spent flask apart.</source>
        <translation>Bariumsalze und Fluoride vergiften beim Verschlucken oder Einatmen; Fluorid gibt mit Säure Flusssäure. Handschuhe, kein Staub; den gebrauchten Kolben getrennt halten.</translation>
    </message>
    <message>
        <source>Silver with ammonia</source>
        <translation>Silber mit Ammoniak</translation>
    </message>
    <message>
        <source>Ammoniacal silver left to stand or dry can form an explosive. Never store it; make it harmless the same day by the site's procedure.</source>
        <translation>Ammoniakalisches Silber kann beim Stehen oder Trocknen einen Sprengstoff bilden. Nie aufbewahren; am selben Tag nach Vorschrift des Betriebs unschädlich machen.</translation>
    </message>
    <message>
        <source>Electrical</source>
        <translation>Strom</translation>
    </message>
    <message>
        <source>Rectifier off or isolated before reaching in; no metal vessel over a live bar; mind the wet floor.</source>
        <translation>Gleichrichter aus oder getrennt, bevor man hineingreift; kein Metallgefäß über einer Schiene unter Spannung; Vorsicht, nasser Boden.</translation>
    </message>
    <message>
        <source>Reminders only. Local codes and permits, the supplier's safety data sheet, and trained and licensed practice on site decide.</source>
        <translation>Nur Erinnerungen. Es entscheiden örtliche Vorschriften und Genehmigungen, das Sicherheitsdatenblatt des Lieferanten und die geschulte, befugte Praxis vor Ort.</translation>
    </message>
</context>
<context>
    <name>Entries</name>
    <message>
        <source>back to normal; %1</source>
        <translation>wieder normal; %1</translation>
    </message>
    <message>
        <source>%1, %2</source>
        <translation>%1, %2</translation>
    </message>
    <message>
        <source>acknowledge</source>
        <translation>quittieren</translation>
    </message>
    <message>
        <source>raised %1</source>
        <translation>ausgelöst %1</translation>
    </message>
    <message>
        <source>never measured</source>
        <translation>nie gemessen</translation>
    </message>
    <message>
        <source>overdue by %1</source>
        <translation>überfällig seit %1</translation>
    </message>
    <message>
        <source>in %1</source>
        <translation>in %1</translation>
    </message>
    <message>
        <source>%1; last %2</source>
        <translation>%1; zuletzt %2</translation>
    </message>
    <message>
        <source>%1: %2</source>
        <translation>%1: %2</translation>
    </message>
    <message>
        <source>due %1</source>
        <translation>fällig %1</translation>
    </message>
    <message>
        <source>acknowledge alarm…</source>
        <translation>Alarm quittieren …</translation>
    </message>
    <message>
        <source>read %1</source>
        <translation>ablesen: %1</translation>
    </message>
    <message>
        <source>titrate %1</source>
        <translation>titrieren: %1</translation>
    </message>
    <message>
        <source>open</source>
        <translation>öffnen</translation>
    </message>
</context>
<context>
    <name>Format</name>
    <message>
        <source>%1 min</source>
        <translation>%1 min</translation>
    </message>
    <message>
        <source>%1 h</source>
        <translation>%1 h</translation>
    </message>
    <message>
        <source>%1 d</source>
        <translation>%1 d</translation>
    </message>
    <message>
        <source>never</source>
        <translation>nie</translation>
    </message>
    <message>
        <source>just now</source>
        <translation>gerade eben</translation>
    </message>
    <message>
        <source>%1 ago</source>
        <translation>vor %1</translation>
    </message>
    <message>
        <source>d MMM</source>
        <extracomment>day and month, Qt date format</extracomment>
        <translation>d. MMM</translation>
    </message>
    <message>
        <source>d MMM yyyy</source>
        <translation>d. MMM yyyy</translation>
    </message>
</context>
<context>
    <name>History</name>
    <message>
        <source>pM of %1</source>
        <translation>pM von %1</translation>
    </message>
</context>
<context>
    <name>Reasons</name>
    <message>
        <source>%1 times</source>
        <translation>%1-fach</translation>
    </message>
    <message>
        <source>%1: %2</source>
        <translation>%1: %2</translation>
    </message>
    <message>
        <source>%1: only %2 left, act limit %3</source>
        <translation>%1: nur noch %2, Eingriffsgrenze %3</translation>
    </message>
    <message>
        <source>%1: only %2 left, caution limit %3</source>
        <translation>%1: nur noch %2, Vorsichtsgrenze %3</translation>
    </message>
    <message>
        <source>%1 outside its limits</source>
        <translation>%1 außerhalb der Grenzen</translation>
    </message>
    <message>
        <source>%1 %2, below its window %3–%4</source>
        <translation>%1 %2, unter dem Fenster %3–%4</translation>
    </message>
    <message>
        <source>%1 %2, above its window %3–%4</source>
        <translation>%1 %2, über dem Fenster %3–%4</translation>
    </message>
    <message>
        <source>%1 %2, past its act limit %3</source>
        <translation>%1 %2, jenseits der Eingriffsgrenze %3</translation>
    </message>
    <message>
        <source>%1 %2, past its caution limit %3</source>
        <translation>%1 %2, jenseits der Vorsichtsgrenze %3</translation>
    </message>
    <message>
        <source>a reading is too old or missing</source>
        <translation>ein Messwert ist zu alt oder fehlt</translation>
    </message>
    <message>
        <source>%1 never measured</source>
        <translation>%1 nie gemessen</translation>
    </message>
    <message>
        <source>%1 older than %2</source>
        <translation>%1 älter als %2</translation>
    </message>
    <message>
        <source>%1 past its sludge line</source>
        <translation>%1 jenseits der Schlammlinie</translation>
    </message>
    <message>
        <source>nothing heard from %1</source>
        <translation>nichts gehört von %1</translation>
    </message>
    <message>
        <source>%1 falling</source>
        <translation>%1 sinkt</translation>
    </message>
    <message>
        <source>%1 falling, %2 to the caution limit</source>
        <translation>%1 sinkt, %2 bis zur Vorsichtsgrenze</translation>
    </message>
    <message>
        <source>not watched while out of service</source>
        <translation>außer Betrieb nicht überwacht</translation>
    </message>
    <message>
        <source>waiting for a first complete set of readings</source>
        <translation>wartet auf den ersten vollständigen Satz Messwerte</translation>
    </message>
    <message>
        <source>no complete reading since %1</source>
        <translation>keine vollständige Messung seit %1</translation>
    </message>
    <message>
        <source>every value inside its window</source>
        <translation>alle Werte im Fenster</translation>
    </message>
    <message>
        <source>%1 %2, caution limit %3</source>
        <translation>%1 %2, Vorsichtsgrenze %3</translation>
    </message>
    <message>
        <source>Sample the bath and titrate %1.</source>
        <translation>Bad beproben und %1 titrieren.</translation>
    </message>
    <message>
        <source>Look at cable, power and port of the instrument.</source>
        <translation>Kabel, Strom und Anschluss des Geräts ansehen.</translation>
    </message>
    <message>
        <source>Repeat the analysis of %1; correct the bath by the shop's procedure if it is confirmed.</source>
        <translation>Analyse von %1 wiederholen; bestätigt sie sich, das Bad nach Betriebsvorschrift korrigieren.</translation>
    </message>
    <message>
        <source>Stop additions of metal and anything that moves pH away; look for haze; call the supervisor.</source>
        <translation>Kein Metall zugeben und nichts, was den pH wegbewegt; nach Trübung sehen; Leitung rufen.</translation>
    </message>
    <message>
        <source>Titrate %1 again; add it by the shop's procedure if it is confirmed.</source>
        <translation>%1 noch einmal titrieren; bestätigt es sich, nach Betriebsvorschrift zugeben.</translation>
    </message>
    <message>
        <source>Read pH again with a checked meter; nothing alkaline into the bath.</source>
        <translation>pH mit geprüftem Messgerät noch einmal lesen; nichts Alkalisches ins Bad.</translation>
    </message>
    <message>
        <source>Read pH again with a checked meter; nothing acid into the bath.</source>
        <translation>pH mit geprüftem Messgerät noch einmal lesen; nichts Saures ins Bad.</translation>
    </message>
    <message>
        <source>Titrate the metal again; no metal salt into the bath.</source>
        <translation>Metall noch einmal titrieren; kein Metallsalz ins Bad.</translation>
    </message>
    <message>
        <source>Look at heater and thermometer; let the bath cool.</source>
        <translation>Heizung und Thermometer ansehen; Bad abkühlen lassen.</translation>
    </message>
    <message>
        <source>Look at heater and thermometer; warm the bath.</source>
        <translation>Heizung und Thermometer ansehen; Bad wärmen.</translation>
    </message>
    <message>
        <source>Look at level and rinse water; add no water.</source>
        <translation>Stand und Spülwasser ansehen; kein Wasser zugeben.</translation>
    </message>
    <message>
        <source>Repeat the analysis and call the supervisor.</source>
        <translation>Analyse wiederholen und Leitung rufen.</translation>
    </message>
    <message>
        <source>liquor stronger than the activity model covers</source>
        <translation>Bad stärker, als das Aktivitätsmodell reicht</translation>
    </message>
    <message>
        <source>no interaction coefficient for %1</source>
        <translation>kein Wechselwirkungskoeffizient für %1</translation>
    </message>
    <message>
        <source>constant of %1 not known at this temperature</source>
        <translation>Konstante von %1 bei dieser Temperatur nicht bekannt</translation>
    </message>
    <message>
        <source>%1 is implausible</source>
        <translation>%1 ist unglaubhaft</translation>
    </message>
    <message>
        <source>uncertainty of %1 not known</source>
        <translation>Unsicherheit von %1 nicht bekannt</translation>
    </message>
</context>
<context>
    <name>Words</name>
    <message>
        <source>fine</source>
        <translation>gut</translation>
    </message>
    <message>
        <source>drifting</source>
        <translation>driftet</translation>
    </message>
    <message>
        <source>tight</source>
        <translation>knapp</translation>
    </message>
    <message>
        <source>brink</source>
        <translation>am Rand</translation>
    </message>
    <message>
        <source>sludging</source>
        <translation>schlammt</translation>
    </message>
    <message>
        <source>stale</source>
        <translation>veraltet</translation>
    </message>
    <message>
        <source>out of service</source>
        <translation>außer Betrieb</translation>
    </message>
    <message>
        <source>no result yet</source>
        <translation>noch kein Ergebnis</translation>
    </message>
    <message>
        <source>%1 ?</source>
        <extracomment>the condition is doubtful</extracomment>
        <translation>%1 ?</translation>
    </message>
    <message>
        <source>pH may rise by</source>
        <translation>pH darf steigen um</translation>
    </message>
    <message>
        <source>pH may fall by</source>
        <translation>pH darf sinken um</translation>
    </message>
    <message>
        <source>%1 that may be lost</source>
        <translation>%1, das verloren gehen darf</translation>
    </message>
    <message>
        <source>metal that may come in</source>
        <translation>Metall, das dazukommen darf</translation>
    </message>
    <message>
        <source>bath may warm by</source>
        <translation>Bad darf wärmer werden um</translation>
    </message>
    <message>
        <source>bath may cool by</source>
        <translation>Bad darf kälter werden um</translation>
    </message>
    <message>
        <source>bath may be diluted</source>
        <translation>Bad darf verdünnt werden</translation>
    </message>
    <message>
        <source>pH room up</source>
        <translation>pH-Spielraum auf</translation>
    </message>
    <message>
        <source>pH room down</source>
        <translation>pH-Spielraum ab</translation>
    </message>
    <message>
        <source>%1 reserve</source>
        <translation>%1-Reserve</translation>
    </message>
    <message>
        <source>metal room</source>
        <translation>Metallspielraum</translation>
    </message>
    <message>
        <source>warming room</source>
        <translation>Wärmespielraum</translation>
    </message>
    <message>
        <source>cooling room</source>
        <translation>Kältespielraum</translation>
    </message>
    <message>
        <source>dilution room</source>
        <translation>Wasserspielraum</translation>
    </message>
    <message>
        <source>ligand</source>
        <translation>Ligand</translation>
    </message>
    <message>
        <source>ammonia</source>
        <translation>Ammoniak</translation>
    </message>
    <message>
        <source>citrate</source>
        <translation>Citrat</translation>
    </message>
    <message>
        <source>tartrate</source>
        <translation>Tartrat</translation>
    </message>
    <message>
        <source>lactate</source>
        <translation>Lactat</translation>
    </message>
    <message>
        <source>glycolate</source>
        <translation>Glycolat</translation>
    </message>
    <message>
        <source>cyanide</source>
        <translation>Cyanid</translation>
    </message>
    <message>
        <source>pyrophosphate</source>
        <translation>Pyrophosphat</translation>
    </message>
    <message>
        <source>caustic</source>
        <translation>Lauge</translation>
    </message>
    <message>
        <source>sulfite</source>
        <translation>Sulfit</translation>
    </message>
    <message>
        <source>thiosulfate</source>
        <translation>Thiosulfat</translation>
    </message>
    <message>
        <source>copper</source>
        <translation>Kupfer</translation>
    </message>
    <message>
        <source>nickel</source>
        <translation>Nickel</translation>
    </message>
    <message>
        <source>zinc</source>
        <translation>Zink</translation>
    </message>
    <message>
        <source>silver</source>
        <translation>Silber</translation>
    </message>
    <message>
        <source>tin</source>
        <translation>Zinn</translation>
    </message>
    <message>
        <source>cadmium</source>
        <translation>Cadmium</translation>
    </message>
    <message>
        <source>pH</source>
        <translation>pH</translation>
    </message>
    <message>
        <source>Temperature</source>
        <translation>Temperatur</translation>
    </message>
    <message>
        <source>addition</source>
        <translation>Zugabe</translation>
    </message>
    <message>
        <source>dump and new make-up</source>
        <translation>Neuansatz</translation>
    </message>
    <message>
        <source>dilution</source>
        <translation>Verdünnung</translation>
    </message>
    <message>
        <source>level noted</source>
        <translation>Stand notiert</translation>
    </message>
    <message>
        <source>ampere-hours</source>
        <translation>Amperestunden</translation>
    </message>
    <message>
        <source>note</source>
        <translation>Notiz</translation>
    </message>
    <message>
        <source>in service</source>
        <translation>in Betrieb</translation>
    </message>
    <message>
        <source>high</source>
        <translation>hoch</translation>
    </message>
    <message>
        <source>medium</source>
        <translation>mittel</translation>
    </message>
    <message>
        <source>low</source>
        <translation>niedrig</translation>
    </message>
</context>
<context>
    <name>tw::ui::AcknowledgeDialog</name>
    <message>
        <source>Acknowledge</source>
        <translation>Quittieren</translation>
    </message>
    <message>
        <source>Acknowledge an alarm</source>
        <translation>Alarm quittieren</translation>
    </message>
    <message>
        <source>Raised %1 (%2), priority %3</source>
        <translation>Ausgelöst %1 (%2), Dringlichkeit %3</translation>
    </message>
    <message>
        <source>What to do: %1</source>
        <translation>Was zu tun ist: %1</translation>
    </message>
    <message>
        <source>Your initials</source>
        <translation>Ihr Kürzel</translation>
    </message>
    <message>
        <source>Comment, may stay empty</source>
        <translation>Bemerkung, darf leer bleiben</translation>
    </message>
    <message>
        <source>Comment</source>
        <translation>Bemerkung</translation>
    </message>
    <message>
        <source>Not now</source>
        <translation>Jetzt nicht</translation>
    </message>
    <message>
        <source>Close without acknowledging</source>
        <translation>Schließen, ohne zu quittieren</translation>
    </message>
    <message>
        <source>Acknowledge the alarm under your initials</source>
        <translation>Alarm unter Ihrem Kürzel quittieren</translation>
    </message>
    <message>
        <source>Not taken: %1</source>
        <translation>Nicht angenommen: %1</translation>
    </message>
</context>
<context>
    <name>tw::ui::AnalysisPanel</name>
    <message>
        <source>Close</source>
        <translation>Schließen</translation>
    </message>
    <message>
        <source>Close the analysis</source>
        <translation>Analyse schließen</translation>
    </message>
    <message>
        <source>Fetching the analysis…</source>
        <translation>Analyse wird geholt …</translation>
    </message>
    <message>
        <source>Not available: %1</source>
        <translation>Nicht verfügbar: %1</translation>
    </message>
    <message>
        <source>%1 ?</source>
        <translation>%1 ?</translation>
    </message>
    <message>
        <source>%1: %2 %3</source>
        <translation>%1: %2 %3</translation>
    </message>
    <message>
        <source>pM of %1</source>
        <translation>pM von %1</translation>
    </message>
    <message>
        <source>pH in the bath</source>
        <translation>pH im Bad</translation>
    </message>
    <message>
        <source>Temperature</source>
        <translation>Temperatur</translation>
    </message>
    <message>
        <source>Ionic strength</source>
        <translation>Ionenstärke</translation>
    </message>
    <message>
        <source>Free %1: %2</source>
        <translation>%1, frei: %2</translation>
    </message>
    <message>
        <source>Where the %1 is</source>
        <translation>Wo %1 steckt</translation>
    </message>
    <message>
        <source>all others</source>
        <translation>alle übrigen</translation>
    </message>
    <message>
        <source>Saturation (0 = sludge line):</source>
        <translation>Sättigung (0 = Schlammlinie):</translation>
    </message>
    <message>
        <source>absent</source>
        <translation>nicht vorhanden</translation>
    </message>
    <message>
        <source>%1: lg %2</source>
        <extracomment>name of a solid, its logarithm of saturation</extracomment>
        <translation>%1: lg %2</translation>
    </message>
</context>
<context>
    <name>tw::ui::AttentionStrip</name>
    <message>
        <source>Needs somebody</source>
        <translation>Braucht jemanden</translation>
    </message>
    <message>
        <source>No tank needs anybody.</source>
        <translation>Kein Bad braucht jemanden.</translation>
    </message>
    <message>
        <source>Alarms to acknowledge</source>
        <translation>Alarme zu quittieren</translation>
    </message>
    <message>
        <source>No alarm waits for an answer.</source>
        <translation>Kein Alarm wartet auf Antwort.</translation>
    </message>
    <message>
        <source>Due</source>
        <translation>Fällig</translation>
    </message>
    <message>
        <source>Nothing is due.</source>
        <translation>Nichts ist fällig.</translation>
    </message>
</context>
<context>
    <name>tw::ui::BenchPanel</name>
    <message>
        <source>acknowledge alarm…</source>
        <translation>Alarm quittieren …</translation>
    </message>
    <message>
        <source>Previous tank</source>
        <translation>Voriges Bad</translation>
    </message>
    <message>
        <source>Next tank</source>
        <translation>Nächstes Bad</translation>
    </message>
    <message>
        <source>overdue, %1</source>
        <translation>überfällig, %1</translation>
    </message>
    <message>
        <source>%1: sampled %2; window %3 to %4, target %5</source>
        <translation>%1: Probe %2; Fenster %3 bis %4, Soll %5</translation>
    </message>
    <message>
        <source>due %1</source>
        <translation>fällig %1</translation>
    </message>
    <message>
        <source>act %1</source>
        <translation>Eingriff %1</translation>
    </message>
    <message>
        <source>caution %1</source>
        <translation>Vorsicht %1</translation>
    </message>
    <message>
        <source>no limit set</source>
        <translation>keine Grenze gesetzt</translation>
    </message>
    <message>
        <source>%1: %2 until %3 reaches its sludge line</source>
        <translation>%1: %2, bis %3 seine Schlammlinie erreicht</translation>
    </message>
    <message>
        <source> (%1)</source>
        <translation> (%1)</translation>
    </message>
    <message>
        <source>Doubtful: %1.</source>
        <translation>Zweifelhaft: %1.</translation>
    </message>
    <message>
        <source>Doubtful: the numbers are given, but not reliable.</source>
        <translation>Zweifelhaft: Die Zahlen stehen da, sind aber nicht verlässlich.</translation>
    </message>
    <message>
        <source>Not reliable over the whole window: %1</source>
        <translation>Nicht im ganzen Fenster verlässlich: %1</translation>
    </message>
    <message>
        <source>The deciding constant is uncertain: calibrate with a jar test.</source>
        <translation>Die entscheidende Konstante ist unsicher: mit einem Becherglasversuch kalibrieren.</translation>
    </message>
    <message>
        <source>%1, %2</source>
        <translation>%1, %2</translation>
    </message>
    <message>
        <source>used margin %1</source>
        <translation>verbrauchter Spielraum %1</translation>
    </message>
    <message>
        <source>used margin unknown</source>
        <translation>verbrauchter Spielraum unbekannt</translation>
    </message>
    <message>
        <source>%1; read %2</source>
        <translation>%1; gemessen %2</translation>
    </message>
    <message>
        <source>%1: %2</source>
        <translation>%1: %2</translation>
    </message>
    <message>
        <source>pM of %1</source>
        <translation>pM von %1</translation>
    </message>
    <message>
        <source>minus the decimal logarithm of the activity of the free metal ion</source>
        <translation>negativer dekadischer Logarithmus der Aktivität des freien Metallions</translation>
    </message>
    <message>
        <source>Mind: %1</source>
        <translation>Achtung: %1</translation>
    </message>
    <message>
        <source>Show or hide the cautions: %1</source>
        <translation>Hinweise zeigen oder verbergen: %1</translation>
    </message>
</context>
<context>
    <name>tw::ui::BenchRow</name>
    <message>
        <source>%1 %2; %3 %4; %5</source>
        <extracomment>name, value, limits, age</extracomment>
        <translation>%1 %2; %3 %4; %5</translation>
    </message>
</context>
<context>
    <name>tw::ui::LargeTank</name>
    <message>
        <source>caution</source>
        <translation>Vorsicht</translation>
    </message>
    <message>
        <source>act</source>
        <translation>Eingriff</translation>
    </message>
    <message>
        <source>sludge line</source>
        <translation>Schlammlinie</translation>
    </message>
    <message>
        <source>out of service</source>
        <translation>außer Betrieb</translation>
    </message>
</context>
<context>
    <name>tw::ui::Legend</name>
    <message>
        <source>Legend: the hatched bed is the used margin; the dashed mark is where it will stand at the end of the horizon; the ticks are the caution and act limits; the notch is the sludge line.</source>
        <translation>Legende: Das schraffierte Bett ist der verbrauchte Spielraum; die gestrichelte Marke zeigt, wo es am Ende des Ausblicks stehen wird; die Striche sind die Vorsichts- und die Eingriffsgrenze; die Kerbe ist die Schlammlinie.</translation>
    </message>
    <message>
        <source>used margin</source>
        <translation>verbrauchter Spielraum</translation>
    </message>
    <message>
        <source>at the end of the horizon</source>
        <translation>am Ende des Ausblicks</translation>
    </message>
    <message>
        <source>caution, act</source>
        <translation>Vorsicht, Eingriff</translation>
    </message>
</context>
<context>
    <name>tw::ui::MainWindow</name>
    <message>
        <source>Tankward</source>
        <translation>Tankward</translation>
    </message>
    <message>
        <source>The service does not answer. You see what was known at %1. Trying again…</source>
        <translation>Der Dienst antwortet nicht. Sie sehen den Stand von %1. Neuer Versuch läuft …</translation>
    </message>
    <message>
        <source>The service does not answer. Trying again…</source>
        <translation>Der Dienst antwortet nicht. Neuer Versuch läuft …</translation>
    </message>
</context>
<context>
    <name>tw::ui::ShareBars</name>
    <message>
        <source>%1 %2</source>
        <translation>%1 %2</translation>
    </message>
</context>
<context>
    <name>tw::ui::StripColumn</name>
    <message>
        <source>%1 (%2)</source>
        <translation>%1 (%2)</translation>
    </message>
</context>
<context>
    <name>tw::ui::StripRow</name>
    <message>
        <source>%1: %2</source>
        <translation>%1: %2</translation>
    </message>
</context>
<context>
    <name>tw::ui::Strips</name>
    <message>
        <source>Strips over time</source>
        <translation>Streifen über der Zeit</translation>
    </message>
    <message>
        <source>d, w, m, y choose day, week, month, year; Left and Right move the crosshair; Enter opens the analysis.</source>
        <translation>d, w, m, y wählen Tag, Woche, Monat, Jahr; Links und Rechts bewegen das Fadenkreuz; Eingabe öffnet die Analyse.</translation>
    </message>
    <message>
        <source>now</source>
        <translation>jetzt</translation>
    </message>
    <message>
        <source>caution</source>
        <translation>Vorsicht</translation>
    </message>
    <message>
        <source>act</source>
        <translation>Eingriff</translation>
    </message>
    <message>
        <source>dashed: straight line ahead</source>
        <translation>gestrichelt: Gerade voraus</translation>
    </message>
</context>
<context>
    <name>tw::ui::TankCard</name>
    <message>
        <source>read %1</source>
        <translation>gemessen %1</translation>
    </message>
    <message>
        <source>no reading yet</source>
        <translation>noch keine Messung</translation>
    </message>
    <message>
        <source>out of service</source>
        <translation>außer Betrieb</translation>
    </message>
    <message>
        <source>used margin %1</source>
        <translation>verbrauchter Spielraum %1</translation>
    </message>
    <message>
        <source>used margin unknown</source>
        <translation>verbrauchter Spielraum unbekannt</translation>
    </message>
    <message>
        <source>, in %1: %2</source>
        <translation>, in %1: %2</translation>
    </message>
    <message>
        <source>Open %1: %2, %3, %4, %5</source>
        <translation>%1 öffnen: %2, %3, %4, %5</translation>
    </message>
    <message>
        <source>%1: %2</source>
        <translation>%1: %2</translation>
    </message>
</context>
<context>
    <name>tw::ui::TankView</name>
    <message>
        <source>key %1</source>
        <translation>Taste %1</translation>
    </message>
    <message>
        <source>Show a %1 (key %2)</source>
        <translation>Zeige %1 (Taste %2)</translation>
    </message>
    <message>
        <source>day</source>
        <translation>Tag</translation>
    </message>
    <message>
        <source>week</source>
        <translation>Woche</translation>
    </message>
    <message>
        <source>month</source>
        <translation>Monat</translation>
    </message>
    <message>
        <source>year</source>
        <translation>Jahr</translation>
    </message>
    <message>
        <source>tick at the foot: addition · dash-dot line: dump · bar at the top: alarm · hollow: corrected</source>
        <translation>Strich am Fuß: Zugabe · Strichpunktlinie: Neuansatz · Balken oben: Alarm · hohl: berichtigt</translation>
    </message>
    <message>
        <source>Which margin the first strip shows</source>
        <translation>Welchen Spielraum der erste Streifen zeigt</translation>
    </message>
    <message>
        <source>Part of the trend is missing: %1</source>
        <translation>Ein Teil des Verlaufs fehlt: %1</translation>
    </message>
    <message>
        <source>Strip %1</source>
        <translation>Streifen %1</translation>
    </message>
</context>
<context>
    <name>tw::ui::TopBar</name>
    <message>
        <source>Line</source>
        <translation>Linie</translation>
    </message>
    <message>
        <source>Tank</source>
        <translation>Bad</translation>
    </message>
    <message>
        <source>Who acts</source>
        <translation>Wer handelt</translation>
    </message>
    <message>
        <source>Show the line (Alt+1)</source>
        <translation>Linie zeigen (Alt+1)</translation>
    </message>
    <message>
        <source>Show the tank (Alt+2)</source>
        <translation>Bad zeigen (Alt+2)</translation>
    </message>
    <message>
        <source>Alt+1</source>
        <translation>Alt+1</translation>
    </message>
    <message>
        <source>Alt+2, next and previous tank: Ctrl+Page Down, Ctrl+Page Up</source>
        <translation>Alt+2, nächstes und voriges Bad: Strg+Bild ab, Strg+Bild auf</translation>
    </message>
    <message>
        <source>initials</source>
        <translation>Kürzel</translation>
    </message>
    <message>
        <source>Who acts: initials</source>
        <translation>Wer handelt: Kürzel</translation>
    </message>
    <message>
        <source>Tankward</source>
        <translation>Tankward</translation>
    </message>
    <message>
        <source>connecting…</source>
        <translation>verbindet …</translation>
    </message>
    <message>
        <source>connected, live</source>
        <translation>verbunden, live</translation>
    </message>
    <message>
        <source>connected</source>
        <translation>verbunden</translation>
    </message>
    <message>
        <source>service lost</source>
        <translation>Dienst fehlt</translation>
    </message>
    <message>
        <source>Service: %1</source>
        <translation>Dienst: %1</translation>
    </message>
    <message>
        <source>last heard %1</source>
        <translation>zuletzt gehört %1</translation>
    </message>
    <message>
        <source>Dark</source>
        <translation>Dunkel</translation>
    </message>
    <message>
        <source>Light</source>
        <translation>Hell</translation>
    </message>
    <message>
        <source>Switch to the dark theme</source>
        <translation>Zum dunklen Farbschema wechseln</translation>
    </message>
    <message>
        <source>Switch to the light theme</source>
        <translation>Zum hellen Farbschema wechseln</translation>
    </message>
</context>
</TS>
