(** * Lists of edges

    What a well-formed question says of its lists, and what the map of neighbours holds. *)

From Coq Require Import Bool List Permutation PArith Arith FMapPositive Sorted Lia.
From Certify Require Import Statement Question.
Import ListNotations.

Implicit Types (u v w x y : vertex) (e f g : vertex * vertex).

Lemma distinct_map : forall (A B : Type) (f : A -> B) l,
  (forall a b, In a l -> In b l -> f a = f b -> a = b) -> NoDup l -> NoDup (map f l).
Proof.
  intros A B f l one distinct. induction distinct as [| a l fresh _ IH]; [constructor |].
  cbn [map]. constructor; [| apply IH; intros; apply one; cbn; tauto].
  rewrite in_map_iff. intros (b & same & listed).
  apply one in same; [subst; easy | cbn; tauto | cbn; tauto].
Qed.

Lemma distinct_app : forall (A : Type) (l m : list A),
  NoDup l -> NoDup m -> (forall a, In a l -> ~ In a m) -> NoDup (l ++ m).
Proof.
  intros A l m l_distinct m_distinct apart.
  induction l_distinct as [| a l fresh _ IH]; [exact m_distinct |].
  cbn [app]. constructor.
  - rewrite in_app_iff. intros [again | again]; [easy |]. apply (apart a); [now left | easy].
  - apply IH. intros b listed. apply apart. now right.
Qed.

Lemma vertex_at_most : forall n v, In v (all_vertices n) <-> Pos.to_nat v <= n.
Proof.
  intros n v. unfold all_vertices. rewrite in_map_iff. split.
  - intros (k & <- & range). apply in_seq in range. rewrite Nat2Pos.id; lia.
  - intros small. exists (Pos.to_nat v). rewrite Pos2Nat.id, in_seq. lia.
Qed.

Lemma all_vertices_distinct : forall n, NoDup (all_vertices n).
Proof.
  intros n. apply distinct_map; [| apply seq_NoDup].
  intros i j i_range j_range. rewrite in_seq in i_range, j_range.
  intros same. apply Nat2Pos.inj in same; lia.
Qed.

Lemma all_vertices_length : forall n, length (all_vertices n) = n.
Proof. intros n. unfold all_vertices. now rewrite map_length, seq_length. Qed.

Lemma pair_eqb_spec : forall e f, pair_eqb e f = true <-> e = f.
Proof.
  intros [u v] [x y]. unfold pair_eqb. cbn [fst snd].
  rewrite andb_true_iff, !Pos.eqb_eq. split; [intros [-> ->] | intros [= -> ->]]; easy.
Qed.

(** ** Sorted lists *)

Definition pair_lt (e f : vertex * vertex) : Prop := pair_ltb e f = true.

Lemma pair_lt_iff : forall e f, pair_lt e f <->
  (fst e < fst f)%positive \/ (fst e = fst f /\ (snd e < snd f)%positive).
Proof.
  intros e f. unfold pair_lt, pair_ltb.
  rewrite orb_true_iff, andb_true_iff, !Pos.ltb_lt, Pos.eqb_eq. easy.
Qed.

Lemma pair_lt_trans : forall e f g, pair_lt e f -> pair_lt f g -> pair_lt e g.
Proof. intros e f g. rewrite !pair_lt_iff. lia. Qed.

Lemma sorted_pairs_strong : forall l, sorted_pairs l = true -> StronglySorted pair_lt l.
Proof.
  intros l sorted. apply Sorted_StronglySorted; [exact pair_lt_trans |].
  induction l as [| e l IH]; [constructor |].
  destruct l as [| f l]; [now repeat constructor |].
  cbn [sorted_pairs] in sorted. apply andb_true_iff in sorted as [first rest].
  constructor; [now apply IH | now constructor].
Qed.

Lemma sorted_pairs_distinct : forall l, sorted_pairs l = true -> NoDup l.
Proof.
  intros l sorted. apply sorted_pairs_strong in sorted.
  induction sorted as [| e l _ IH above]; constructor; [| exact IH].
  intros again. rewrite Forall_forall in above. apply above, pair_lt_iff in again. lia.
Qed.

Lemma subset_step : forall e l f m,
  subset (e :: l) (f :: m) = if pair_eqb e f then subset l m else subset (e :: l) m.
Proof. reflexivity. Qed.

Lemma subset_incl : forall l m, subset l m = true -> incl l m.
Proof.
  induction l as [| e l IH]; intros m holds f listed; [easy |].
  induction m as [| g m IHm]; [easy |]. rewrite subset_step in holds.
  destruct (pair_eqb e g) eqn:same.
  - apply pair_eqb_spec in same as <-. destruct listed as [<- | listed]; [now left |].
    right. now apply (IH m).
  - right. now apply IHm.
Qed.

(** Each edge is written with its smaller end first. *)
Definition ascending (l : list (vertex * vertex)) : Prop :=
  forall u v, In (u, v) l -> (u < v)%positive.

Lemma well_formed_spec : forall Q, well_formed Q = true ->
  ascending (edges Q) /\ NoDup (edges Q) /\ NoDup (needed Q) /\ incl (needed Q) (edges Q) /\
  (forall u v, In (u, v) (edges Q) -> Pos.to_nat v <= order Q).
Proof.
  intros Q. unfold well_formed, ascending. destruct (order Q) as [| n] eqn:size.
  - destruct (edges Q), (needed Q); try discriminate. intros _.
    repeat split; try easy; constructor.
  - rewrite !andb_true_iff, forallb_forall. intros [[[range sorted] needed_sorted] part].
    assert (fine : forall u v, In (u, v) (edges Q) ->
                   (u < v)%positive /\ Pos.to_nat v <= S n).
    { intros u v listed. apply range in listed. unfold pair_fine in listed. cbn [fst snd] in listed.
      rewrite andb_true_iff, Pos.ltb_lt, Pos.leb_le in listed. lia. }
    repeat split.
    + intros u v listed. now apply fine.
    + now apply sorted_pairs_distinct.
    + now apply sorted_pairs_distinct.
    + now apply subset_incl.
    + intros u v listed. now apply (fine u).
Qed.

(** ** Edges with their smaller end first *)

Definition ordered (e : vertex * vertex) : vertex * vertex :=
  if (fst e <? snd e)%positive then e else (snd e, fst e).

Lemma ordered_cases : forall u v,
  (u < v)%positive /\ ordered (u, v) = (u, v) \/
  (v <= u)%positive /\ ordered (u, v) = (v, u).
Proof. intros u v. unfold ordered. cbn [fst snd]. destruct (Pos.ltb_spec u v); tauto. Qed.

Lemma ordered_listed : forall l u v, ascending l -> u <> v ->
  In (ordered (u, v)) l <-> In (u, v) l \/ In (v, u) l.
Proof.
  intros l u v up differ. destruct (ordered_cases u v) as [[less ->] | [less ->]].
  - split; [tauto |]. intros [? | back]; [easy | apply up in back; lia].
  - split; [tauto |]. intros [back | ?]; [apply up in back; lia | easy].
Qed.

Lemma ordered_same : forall u v x y, ordered (u, v) = ordered (x, y) ->
  (u, v) = (x, y) \/ (u, v) = (y, x).
Proof.
  intros u v x y. destruct (ordered_cases u v) as [[_ ->] | [_ ->]],
    (ordered_cases x y) as [[_ ->] | [_ ->]]; intros [= -> ->]; tauto.
Qed.

(** ** The map of neighbours *)

(** The end of [e] that is not [u], when [e] has the end [u]. *)
Definition other (u : vertex) (e : vertex * vertex) : list vertex :=
  if (fst e =? u)%positive then [snd e]
  else if (snd e =? u)%positive then [fst e] else [].

Lemma neighbours_insert : forall m u v w,
  neighbours (insert u v m) w = if (u =? w)%positive then v :: neighbours m w else neighbours m w.
Proof.
  intros m u v w. unfold neighbours, insert. destruct (Pos.eqb_spec u w) as [<- | differ].
  - destruct (PositiveMap.find u m); now rewrite PositiveMap.gss.
  - destruct (PositiveMap.find u m); rewrite PositiveMap.gso; congruence.
Qed.

Lemma neighbours_list : forall Q u, ascending (edges Q) ->
  Permutation (neighbours (adjacency Q) u) (flat_map (other u) (edges Q)).
Proof.
  intros Q u up. unfold adjacency.
  assert (start : neighbours (PositiveMap.empty (list vertex)) u = [])
    by (unfold neighbours; now rewrite PositiveMap.gempty).
  rewrite <- (app_nil_r (flat_map _ _)), <- start. clear start.
  generalize (PositiveMap.empty (list vertex)). revert up. generalize (edges Q).
  induction l as [| [x y] l IH]; intros up m; [apply Permutation_refl |].
  cbn [fold_left flat_map fst snd]. rewrite IH by (intros ? ? ?; apply up; now right).
  rewrite !neighbours_insert. unfold other at 2. cbn [fst snd].
  assert (x < y)%positive by (apply up; now left).
  destruct (Pos.eqb_spec x u) as [E | _], (Pos.eqb_spec y u) as [F | _];
    [subst; lia | | | apply Permutation_refl];
    cbn [app]; symmetry; apply Permutation_middle.
Qed.

Lemma other_in : forall u v l, ascending l ->
  In v (flat_map (other u) l) <-> In (u, v) l \/ In (v, u) l.
Proof.
  intros u v l up. rewrite in_flat_map. unfold other. split.
  - intros ([x y] & listed & held). cbn [fst snd] in held.
    destruct (Pos.eqb_spec x u) as [<- | _]; [destruct held as [<- | []]; tauto |].
    destruct (Pos.eqb_spec y u) as [<- | _]; [destruct held as [<- | []]; tauto | easy].
  - intros [listed | listed].
    + exists (u, v). cbn [fst snd]. rewrite Pos.eqb_refl. cbn. tauto.
    + exists (v, u). cbn [fst snd]. rewrite Pos.eqb_refl. apply up in listed as less.
      destruct (Pos.eqb_spec v u); [lia | cbn; tauto].
Qed.

Lemma other_distinct : forall u l, ascending l -> NoDup l -> NoDup (flat_map (other u) l).
Proof.
  intros u l up distinct. induction distinct as [| [x y] l fresh _ IH]; [constructor |].
  assert (x < y)%positive by (apply up; now left).
  assert (later : ascending l) by (intros ? ? ?; apply up; now right).
  cbn [flat_map]. unfold other at 1. cbn [fst snd].
  destruct (Pos.eqb_spec x u) as [<- | _]; [| destruct (Pos.eqb_spec y u) as [<- | _]];
    cbn [app]; [| | now apply IH];
    (constructor; [| now apply IH]);
    intros again; apply other_in in again as [again | again]; try easy; try assumption;
    apply later in again; lia.
Qed.
